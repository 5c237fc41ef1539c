import type { Session } from '#shared/api/session.ts'
import { roleWords } from '#src/components/layout/role-words.ts'
import { RuledList, RuledRow, RuledSection } from '#src/components/ui/ruled.tsx'

export type DemoPerson = Session['demoSignIns'][number]

/** The people of the demo shop as rows; a press fills the form, so that signing in stays what it is. */
export function DemoPeople({ people, onPick }: { readonly people: readonly DemoPerson[]; readonly onPick: (person: DemoPerson) => void }) {
  return (
    <RuledSection title="Demo people" className="mt-10">
      <RuledList>
        {people.map((person) => (
          <RuledRow key={person.email} className="py-0!">
            <button
              type="button"
              onClick={() => onPick(person)}
              className="flex min-h-12 w-full flex-wrap items-baseline gap-x-3 py-2.5 text-left hover:bg-cord-wash"
            >
              <span className="font-semibold">{person.name}</span>
              <span className="text-small text-ink-2">{roleWords[person.role]}</span>
              <span className="ml-auto pr-1 text-small font-medium text-cord">Fill in</span>
            </button>
          </RuledRow>
        ))}
      </RuledList>
    </RuledSection>
  )
}
