import { useState } from 'react'

import type { Person } from '#shared/api/people.ts'
import type { PersonId } from '#shared/lib/ids.ts'
import { useUpdatePerson } from '#src/api/people.ts'
import { roleWords } from '#src/components/layout/role-words.ts'
import { Button } from '#src/components/ui/button.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { RuledSection, RuledTable } from '#src/components/ui/ruled.tsx'
import { UndoRow } from '#src/components/ui/undo-row.tsx'
import { formatSince } from '#src/lib/format.ts'
import { toWords } from '#src/lib/problem-words.ts'

import { AddPersonForm } from './add-person-form.tsx'
import type { HandedLink } from './link-panel.tsx'
import { LinkPanel } from './link-panel.tsx'
import type { PersonChange } from './person-editor.tsx'
import { PersonEditor } from './person-editor.tsx'
import { PersonState } from './person-words.tsx'

type LastChange = { readonly person: Person; readonly undo: PersonChange }
type Opened = { readonly what: 'nothing' } | { readonly what: 'adding' } | { readonly what: 'person'; readonly id: PersonId }

const nothing: Opened = { what: 'nothing' }

/** The people of the shop as one ruled sheet: who, in which role, and where they stand; one thing is open at a time. */
export function PeopleSheet({ people, ownId }: { readonly people: readonly Person[]; readonly ownId: PersonId }) {
  const [opened, setOpened] = useState<Opened>(nothing)
  const [link, setLink] = useState<HandedLink | null>(null)
  const [last, setLast] = useState<LastChange | null>(null)
  const [now] = useState(() => Date.now())
  const undo = useUpdatePerson()

  const onLink = (made: HandedLink): void => {
    setLink(made)
    setOpened(nothing)
    setLast(null)
  }
  const onChanged = (person: Person, back: PersonChange): void => {
    setLast({ person, undo: back })
    setOpened(nothing)
  }
  const onUndo = (): void => {
    if (last !== null) undo.mutate({ id: last.person.id, ...last.undo }, { onSuccess: () => setLast(null) })
  }

  return (
    <div className="grid max-w-sheet gap-6 pt-6">
      {last !== null && (
        <UndoRow onUndo={onUndo} busy={undo.isPending} onDismiss={() => setLast(null)}>
          {describeChange(last)}
        </UndoRow>
      )}
      {undo.error !== null && (
        <Notice state="bad" role="alert" title="Not undone">
          {toWords(undo.error)}
        </Notice>
      )}
      {link !== null && <LinkPanel link={link} onDone={() => setLink(null)} />}
      {opened.what === 'adding' && <AddPersonForm onAdded={onLink} onCancel={() => setOpened(nothing)} />}
      <RuledSection
        title={people.length === 1 ? 'One person' : `${people.length} people`}
        aside={
          opened.what !== 'adding' && (
            <Button look="primary" onClick={() => setOpened({ what: 'adding' })}>
              Add a person
            </Button>
          )
        }
      >
        <RuledTable
          caption="People of the shop"
          rows={people}
          rowKey={({ id }) => id}
          rowClassName={({ id }) => (opened.what === 'person' && opened.id === id ? 'washed' : '')}
          columns={[
            {
              key: 'name',
              head: 'Name',
              isRowHead: true,
              cell: ({ id, name }) => (id === ownId ? `${name} (you)` : name),
            },
            { key: 'email', head: 'E-mail', cell: ({ email }) => <EmailWords email={email} /> },
            { key: 'role', head: 'Role', className: 'roomy:whitespace-nowrap', cell: ({ role }) => roleWords[role] },
            { key: 'state', head: 'State', cell: (person) => <PersonState person={person} now={now} /> },
            {
              key: 'seen',
              head: 'Last seen',
              className: 'roomy:whitespace-nowrap',
              cell: ({ lastSeenAt }) => (lastSeenAt === null ? 'never' : formatSince(lastSeenAt)),
            },
            {
              key: 'acts',
              head: 'Acts',
              hidden: true,
              align: 'right',
              cell: ({ id, name }) => {
                const isOpen = opened.what === 'person' && opened.id === id
                return (
                  <Button aria-label={`Change ${name}`} aria-expanded={isOpen} onClick={() => setOpened(isOpen ? nothing : { what: 'person', id })}>
                    Change
                  </Button>
                )
              },
            },
          ]}
          detail={(person) =>
            opened.what === 'person' && opened.id === person.id ? (
              <PersonEditor person={person} now={now} onChanged={onChanged} onLink={onLink} onClose={() => setOpened(nothing)} />
            ) : null
          }
        />
      </RuledSection>
    </div>
  )
}

/** An address breaks before its @, and elsewhere only where there is no other way. */
function EmailWords({ email }: { readonly email: string }) {
  const at = email.lastIndexOf('@')
  return (
    <span className="wrap-anywhere">
      {email.slice(0, at)}
      <wbr />
      {email.slice(at)}
    </span>
  )
}

function describeChange({ person, undo }: LastChange): string {
  if (undo.isActive === true) return `${person.name} is deactivated and signed out everywhere.`
  if (undo.isActive === false) return `${person.name} is active again.`
  if (undo.role !== undefined) return `${person.name} is now ${roleWords[person.role].toLowerCase()}; it counts from the next thing they do.`
  return `${person.name}: the name is changed.`
}
