import { useQuery } from '@tanstack/react-query'
import { useState } from 'react'

import type { Colleague } from '#shared/api/people.ts'
import type { PersonId } from '#shared/lib/ids.ts'
import type { Role } from '#shared/trade/roles.ts'
import { isOpen, liveTrail } from '#shared/walk/state.ts'
import { nameAt } from '#shared/walk/words.ts'
import { peopleQueries } from '#src/api/people.ts'
import { Tie } from '#src/components/knots/cord.tsx'
import { roleWords } from '#src/components/layout/role-words.ts'
import { Button } from '#src/components/ui/button.tsx'
import { RadioGroup } from '#src/components/ui/field.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { Placeholder } from '#src/components/ui/placeholder.tsx'
import { RuledList, RuledRow } from '#src/components/ui/ruled.tsx'
import { toWords } from '#src/lib/problem-words.ts'
import { toLineWords } from '#src/lib/walk-words.ts'
import { HoldForm } from '#src/features/walk-player/parts/hold-form.tsx'
import { NoteField, toLengthWords } from '#src/features/walk-player/parts/note-field.tsx'
import { Panel } from '#src/features/walk-player/panels/panel.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'

/** Every line of the trail, youngest first, each with the way back to it. */
export function TrailPanel() {
  const { walk, charts, format, stepBack, closePanel, tap } = usePlayer()
  const canStepBack = isOpen(walk) && !walk.isPaused && ['at-node', 'at-cause', 'proven', 'escalated'].includes(walk.phase)
  const lines = liveTrail(walk).toReversed()
  return (
    <Panel title="Trail" over={nameAt(charts, walk, walk.start).chartTitle}>
      {lines.length === 0 ? (
        <p>Nothing is found yet. Each finding ties a knot here.</p>
      ) : (
        <>
          <p className="text-small text-ink-2">
            {canStepBack
              ? 'Go back to a check to answer it anew. What was found after it is offered again; nothing leaves the log.'
              : 'The walk is past the point where it can step back.'}
          </p>
          <RuledList className="border-t border-rule">
            {lines.map((line) => {
              const { node, found } = toLineWords({ charts, walk, format }, line)
              return (
                <RuledRow key={line.eventId} className="flex flex-wrap items-center justify-between gap-x-4">
                  <Tie kind={node.kind} />
                  <span className="grid min-w-0 flex-1 basis-40">
                    <span className="text-small text-ink-2">
                      {node.number} {node.title}
                    </span>
                    <span className="font-medium">{found}</span>
                  </span>
                  {canStepBack && line.kind !== 'step' && (
                    <Button
                      onClick={() =>
                        tap(() => {
                          stepBack(line.eventId, `Back at: ${node.title}`)
                          closePanel()
                        })
                      }
                    >
                      Go back<span className="for-ears"> to {node.title}</span>
                    </Button>
                  )}
                </RuledRow>
              )
            })}
          </RuledList>
        </>
      )}
    </Panel>
  )
}

export function HoldPanel() {
  const { closePanel } = usePlayer()
  return (
    <Panel title="Not safe to hand back">
      <p>Tag the machine, disable it, and write down why. It leaves the shop only tagged and with the owner’s signature that they were told.</p>
      <HoldForm onHeld={closePanel} />
    </Panel>
  )
}

/** The one who is asked first comes first: a lead, then the owner; the list itself comes by name. */
const orderOfRoles: readonly Role[] = ['lead', 'owner', 'junior']

/** Hands the walk to anybody of the shop; it waits for them, paused. */
export function HandOverPanel() {
  const { person } = usePlayer()
  const { data, error } = useQuery(peopleQueries.active())
  const others = data?.people
    .filter(({ id }) => id !== person.id)
    .toSorted((left, right) => orderOfRoles.indexOf(left.role) - orderOfRoles.indexOf(right.role))
  return (
    <Panel title="Hand over">
      {others === undefined && error === null && <Placeholder words="Reading who is in the shop" rows={2} />}
      {others === undefined && error !== null && (
        <Notice state="care" title="Who is in the shop could not be read">
          {toWords(error)} The walk can wait meanwhile: pause it, and a lead can take it over.
        </Notice>
      )}
      {others?.length === 0 && <p>Nobody else of the shop can sign in yet. The owner adds people under “People”; pause the walk until then.</p>}
      {others?.[0] !== undefined && <HandOverForm people={others} first={others[0]} />}
    </Panel>
  )
}

function HandOverForm({ people, first }: { readonly people: readonly Colleague[]; readonly first: Colleague }) {
  const { record, closePanel, tap } = usePlayer()
  const [picked, setPicked] = useState<PersonId | null>(null)
  const [why, setWhy] = useState('')
  const { id: to } = people.find(({ id }) => id === picked) ?? first
  const handOver = (): void => {
    if (toLengthWords(why) !== undefined) return
    if (record([{ type: 'handed-over', payload: { to, ...(why.trim() === '' ? {} : { why: why.trim() }) } }], 'Handed over.')) closePanel()
  }
  return (
    <>
      <RadioGroup
        label="To whom"
        name="to"
        choices={people.map(({ id, name, role }) => ({ value: id, words: name, hint: roleWords[role] }))}
        value={to}
        onChange={(event) => setPicked(event.target.value as PersonId)}
      />
      <NoteField label="What they should know (may stay empty)" value={why} onChange={setWhy} />
      <Button look="primary" size="large" onClick={() => tap(handOver)} className="justify-self-start">
        Hand over
      </Button>
    </>
  )
}
