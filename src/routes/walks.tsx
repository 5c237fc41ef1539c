import { usePerson } from '#src/api/session.ts'
import { AppShell } from '#src/components/layout/app-shell.tsx'
import { WalksPage } from '#src/features/walks/walks-page.tsx'

export function Component() {
  const person = usePerson()
  if (person === null) return null
  return (
    <AppShell surface="Walks">
      <WalksPage person={person} />
    </AppShell>
  )
}
