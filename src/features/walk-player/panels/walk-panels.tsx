import { useState } from 'react'

import type { PersonId } from '#shared/lib/ids.ts'
import { isOpen, liveTrail } from '#shared/walk/state.ts'
import { nameAt } from '#shared/walk/words.ts'
import { Tie } from '#src/components/knots/cord.tsx'
import { Button } from '#src/components/ui/button.tsx'
import { RadioGroup } from '#src/components/ui/field.tsx'
import { RuledList, RuledRow } from '#src/components/ui/ruled.tsx'
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

/** Hands the walk to somebody who has been in it; a lead can take any open walk without that. */
export function HandOverPanel() {
  const { people, person, record, closePanel, tap } = usePlayer()
  const others = (Object.entries(people) as [PersonId, string][]).filter(([id]) => id !== person.id)
  const [to, setTo] = useState<PersonId | null>(others[0]?.[0] ?? null)
  const [why, setWhy] = useState('')
  const handOver = (): void => {
    if (to === null || toLengthWords(why) !== undefined) return
    if (record([{ type: 'handed-over', payload: { to, ...(why.trim() === '' ? {} : { why: why.trim() }) } }], 'Handed over.')) closePanel()
  }
  return (
    <Panel title="Hand over">
      {others.length === 0 ? (
        <p>Nobody else has been in this walk yet. Pause it: the lead can take it over from the list of open walks.</p>
      ) : (
        <>
          <RadioGroup
            label="To whom"
            name="to"
            choices={others.map(([value, words]) => ({ value, words }))}
            {...(to === null ? {} : { value: to })}
            onChange={(event) => setTo(event.target.value as PersonId)}
          />
          <NoteField label="What they should know (may stay empty)" value={why} onChange={setWhy} />
          <Button look="primary" size="large" onClick={() => tap(handOver)} className="justify-self-start">
            Hand over
          </Button>
        </>
      )}
    </Panel>
  )
}
