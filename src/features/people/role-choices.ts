import type { Role } from '#shared/trade/roles.ts'
import { roles } from '#shared/trade/roles.ts'
import { roleWords } from '#src/components/layout/role-words.ts'

const hints: Readonly<Record<Role, string>> = {
  junior: 'Walks charts, records what was found, asks the lead.',
  lead: 'Also writes and publishes charts, reviews anyone’s walks.',
  owner: 'Also people, prices, settings and the count sheet.',
}

export const roleChoices = roles.map((value) => ({ value, words: roleWords[value], hint: hints[value] }))
