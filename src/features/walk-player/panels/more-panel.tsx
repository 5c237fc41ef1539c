import type { ReactNode } from 'react'

import { engineKindWords, equipmentClassWords } from '#shared/trade/equipment.ts'
import { openAccess } from '#shared/walk/select.ts'
import { isOpen } from '#shared/walk/state.ts'
import { Checkbox } from '#src/components/ui/field.tsx'
import { RuledPairs } from '#src/components/ui/ruled.tsx'
import { TextLink } from '#src/components/ui/text-link.tsx'
import { Panel } from '#src/features/walk-player/panels/panel.tsx'
import type { PanelName } from '#src/features/walk-player/player-context.ts'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { useIsAwakeLocked } from '#src/features/walk-player/wake-lock.ts'
import { formatMinutes, formatMoment, formatSeconds } from '#src/lib/format.ts'
import { paths } from '#src/lib/paths.ts'
import { setShortcutsOn, useAreShortcutsOn } from '#src/lib/shortcuts.ts'

/** What can be done with the walk besides answering, and what is true of it. */
export function MorePanel() {
  const { walk, charts, record, closePanel, openPanel, machineTitle, tap } = usePlayer()
  const isWakeLocked = useIsAwakeLocked()
  const open = openAccess(charts, walk)
  const isGoing = isOpen(walk)
  const pause = (): void => {
    if (record([{ type: 'paused', payload: {} }], 'Paused.')) closePanel()
  }
  return (
    <Panel title="This walk" over={machineTitle}>
      <ul role="list" className="border-t border-rule">
        <Way name="trail" words="Trail: go back to a check" openPanel={openPanel} />
        {isGoing && !walk.isPaused && (
          <>
            <Row>
              <RowButton onClick={() => tap(pause)}>Pause</RowButton>
            </Row>
            <Way name="hand-over" words="Hand over" openPanel={openPanel} />
          </>
        )}
        {isGoing && (
          <>
            <Way name="machine" words="Model and serial number" openPanel={openPanel} />
            <Way name="flag" words="Something is wrong with this check" openPanel={openPanel} />
            {walk.phase !== 'held' && <Way name="hold" words="Hold it: not safe to hand back" openPanel={openPanel} />}
            <Way name="give-up" words="Give the walk up" openPanel={openPanel} />
          </>
        )}
        <Way name="keys" words="Keys" openPanel={openPanel} />
        <Row>
          <TextLink to={paths.bench()} className="flex min-h-14 items-center py-2 leading-7">
            To the bench: this walk stays open
          </TextLink>
        </Row>
        <Row>
          <TextLink to={paths.walkReview(walk.walkId)} className="flex min-h-14 items-center py-2 leading-7">
            Log and chart of this walk
          </TextLink>
        </Row>
      </ul>
      <RuledPairs
        pairs={[
          { name: 'Machine', value: `${equipmentClassWords[walk.machine.class]}, ${engineKindWords[walk.machine.engine].toLowerCase()}` },
          ...(walk.machine.serial === undefined ? [] : [{ name: 'Serial', value: <span className="figures">{walk.machine.serial}</span> }]),
          { name: 'Started', value: formatMoment(walk.startedAt) },
          { name: 'What’s off now', value: open.length === 0 ? 'nothing' : open.map(({ title }) => title).join(', ') },
          { name: 'Minutes used', value: `${formatMinutes(walk.minutesUsed)} by the chart, ${formatSeconds(walk.secondsMeasured)} measured` },
          ...(walk.waitMinutes === 0 ? [] : [{ name: 'Waiting', value: `${formatMinutes(walk.waitMinutes)} by the chart` }]),
          { name: 'Screen', value: isWakeLocked ? 'stays on during the walk' : 'may go dark: this browser does not keep it on' },
        ]}
      />
      <p className="text-small text-ink-2">The maker’s manual, local codes and licensed practice come first.</p>
    </Panel>
  )
}

function Row({ children }: { readonly children: ReactNode }) {
  return <li className="border-b border-hair">{children}</li>
}

function RowButton({ onClick, children }: { readonly onClick: () => void; readonly children: ReactNode }) {
  return (
    <button
      type="button"
      onClick={onClick}
      className="flex min-h-14 w-full items-center justify-between gap-4 py-2 text-left leading-7 font-medium hover:bg-cord-wash"
    >
      {children}
    </button>
  )
}

function Way({ name, words, openPanel }: { readonly name: PanelName; readonly words: string; readonly openPanel: (name: PanelName) => void }) {
  return (
    <Row>
      <RowButton onClick={() => openPanel(name)}>
        {words}
        <svg viewBox="0 0 10 16" aria-hidden="true" className="mr-1 h-4 w-2.5 shrink-0 text-cord">
          <path d="M1.5 1.5 8 8l-6.5 6.5" fill="none" stroke="currentColor" strokeWidth="2" />
        </svg>
      </RowButton>
    </Row>
  )
}

const keys: readonly (readonly [string, string])[] = [
  ['1 to 9', 'the outcome with this balloon'],
  ['0', 'no answer'],
  ['R', 'type the reading; Enter records it'],
  ['N', 'write a note'],
  ['Backspace', 'back to the check before'],
  ['?', 'this list'],
]

export function KeysPanel() {
  const areOn = useAreShortcutsOn()
  return (
    <Panel title="Keys">
      <Checkbox
        label="Single keys act"
        hint="Off for whoever speaks to the machine or rests a hand on the keyboard."
        checked={areOn}
        onChange={(event) => setShortcutsOn(event.target.checked)}
      />
      <RuledPairs pairs={keys.map(([name, value]) => ({ name, value }))} className={areOn ? '' : 'text-ink-2'} />
      <p className="text-small text-ink-2">No key acts while a field is being written in.</p>
    </Panel>
  )
}
