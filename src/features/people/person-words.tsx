import type { Person } from '#shared/api/people.ts'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { formatMoment } from '#src/lib/format.ts'

/** Where a person stands with the shop, as shape, word and colour. */
export function PersonState({ person, now }: { readonly person: Person; readonly now: number }) {
  if (person.status === 'active') return <StateMark state="good">active</StateMark>
  if (person.status === 'deactivated') return <StateMark state="open">deactivated</StateMark>
  const isLinkAlive = person.linkExpiresAt !== null && Date.parse(person.linkExpiresAt) > now
  return isLinkAlive ? <StateMark state="info">waiting for a password</StateMark> : <StateMark state="care">link ran out</StateMark>
}

/** Until when a link works, or `null` when none is out. */
export function describeLink(person: Person, now: number): string | null {
  if (person.linkExpiresAt === null || Date.parse(person.linkExpiresAt) <= now) return null
  return `A one-time link is out; it works until ${formatMoment(person.linkExpiresAt)}.`
}
