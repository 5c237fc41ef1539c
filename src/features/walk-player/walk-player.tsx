import { useQuery } from '@tanstack/react-query'
import type { ReactNode } from 'react'
import { useEffect } from 'react'

import { assertNever } from '#shared/lib/assert-never.ts'
import type { SignedIn } from '#shared/api/session.ts'
import type { NumberFormat } from '#shared/units/number-format.ts'
import type { WalkPage } from '#shared/walk/page.ts'
import { passedOver } from '#shared/walk/select.ts'
import { isOpen } from '#shared/walk/state.ts'
import { causeWords } from '#shared/walk/words.ts'
import type { WalkDetail } from '#src/api/walk-logs.ts'
import { walkQueries } from '#src/api/walks.ts'
import { EmptyState } from '#src/components/ui/empty-state.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { Placeholder } from '#src/components/ui/placeholder.tsx'
import { Frame } from '#src/features/walk-player/frame.tsx'
import { AskPage } from '#src/features/walk-player/pages/ask-page.tsx'
import { BeforePage } from '#src/features/walk-player/pages/before-page.tsx'
import { CausePage } from '#src/features/walk-player/pages/cause-page.tsx'
import { CautionPage } from '#src/features/walk-player/pages/caution-page.tsx'
import { CheckPage } from '#src/features/walk-player/pages/check-page.tsx'
import { EndedPage } from '#src/features/walk-player/pages/ended-page.tsx'
import { EscalatedPage } from '#src/features/walk-player/pages/escalated-page.tsx'
import { HeldPage, HoldPage } from '#src/features/walk-player/pages/hold-page.tsx'
import { PickPage } from '#src/features/walk-player/pages/pick-page.tsx'
import { ProofPage } from '#src/features/walk-player/pages/proof-page.tsx'
import { ProvenPage } from '#src/features/walk-player/pages/proven-page.tsx'
import { ReadingPage } from '#src/features/walk-player/pages/reading-page.tsx'
import { RunPage } from '#src/features/walk-player/pages/run-page.tsx'
import { RunPassedPage } from '#src/features/walk-player/pages/run-passed-page.tsx'
import { StepPage } from '#src/features/walk-player/pages/step-page.tsx'
import { OtherHandsPage, PausedPage } from '#src/features/walk-player/pages/waiting-pages.tsx'
import { KeysPanel, MorePanel } from '#src/features/walk-player/panels/more-panel.tsx'
import { HandOverPanel, HoldPanel, TrailPanel } from '#src/features/walk-player/panels/walk-panels.tsx'
import { MachinePanel } from '#src/features/walk-player/panels/machine-panel.tsx'
import { AskPanel, FlagPanel, GiveUpPanel, NotePanel } from '#src/features/walk-player/panels/writing-panels.tsx'
import { Answered } from '#src/features/walk-player/parts/answered.tsx'
import { SetAsideNotice } from '#src/features/walk-player/parts/set-aside-notice.tsx'
import type { PanelName } from '#src/features/walk-player/player-context.ts'
import { PlayerContext, useIsHere, usePlayer } from '#src/features/walk-player/player-context.ts'
import { usePlayerState } from '#src/features/walk-player/use-player.ts'
import { useWakeLock } from '#src/features/walk-player/wake-lock.ts'
import { announce } from '#src/lib/announce.ts'

type WalkPlayerProps = { readonly detail: WalkDetail; readonly person: SignedIn; readonly format: NumberFormat }

/** How often the server is asked for the lead's answer while one is awaited. */
const answerPollMs = 5000

/** A walk, one check a page. */
export function WalkPlayer({ detail, person, format }: WalkPlayerProps) {
  const { log, snapshot, panel, refusal, player } = usePlayerState({ detail, person, format })
  useWakeLock()
  const isAwaiting = player !== null && isOpen(player.walk) && player.walk.questions.some(({ answer }) => answer === null)
  useQuery({ ...walkQueries.detail(log.walkId), refetchInterval: isAwaiting ? answerPollMs : false })
  useSavedAnnouncement(snapshot.saved.kind)
  if (player === null) return <LostWalk />
  return (
    <PlayerContext value={player}>
      <Frame
        saved={snapshot.saved}
        onRetry={() => log.retry()}
        panel={panel}
        notices={
          <>
            {snapshot.setAside.length > 0 && <SetAsideNotice setAside={snapshot.setAside} onRead={() => log.forgetSetAside()} />}
            {refusal !== null && (
              <Notice state="bad" title="Not recorded" role="alert" className="mt-4">
                {refusal.words}
              </Notice>
            )}
            {panel === null && <RuledOut />}
            {panel === null && <Passed />}
            {panel === null && <Answered />}
          </>
        }
      >
        {snapshot.isReloading ? <Placeholder words="Reading the walk from the server" /> : panel === null ? <Page /> : <PanelOf name={panel} />}
      </Frame>
    </PlayerContext>
  )
}

/** "Saved" is said once when something was not, never with every tap. */
function useSavedAnnouncement(kind: 'saved' | 'sending' | 'waiting' | 'stuck'): void {
  const isLost = kind === 'waiting' || kind === 'stuck'
  useEffect(() => {
    if (!isLost) return
    announce('Not sent yet. What you record is kept on this page.')
    return () => announce('Saved.')
  }, [isLost])
}

function Page(): ReactNode {
  const { page, walk } = usePlayer()
  const isHere = useIsHere()
  return isOpen(walk) && !isHere ? <OtherHandsPage page={page} /> : <PageOf page={page} />
}

function PageOf({ page }: { readonly page: WalkPage }): ReactNode {
  switch (page.kind) {
    case 'caution':
      return <CautionPage page={page} />
    case 'check':
      return <CheckPage page={page} />
    case 'reading':
      return <ReadingPage page={page} />
    case 'before':
      return <BeforePage page={page} />
    case 'proof':
      return <ProofPage page={page} />
    case 'step':
      return <StepPage page={page} />
    case 'pick':
      return <PickPage page={page} />
    case 'ask':
      return <AskPage page={page} />
    case 'hold':
      return <HoldPage page={page} />
    case 'held':
      return <HeldPage page={page} />
    case 'cause':
      return <CausePage page={page} />
    case 'proven':
      return <ProvenPage page={page} />
    case 'run':
      return <RunPage page={page} />
    case 'run-passed':
      return <RunPassedPage page={page} />
    case 'escalated':
      return <EscalatedPage page={page} />
    case 'closed':
    case 'abandoned':
      return <EndedPage page={page} />
    case 'paused':
      return <PausedPage page={page} />
    case 'free':
    case 'lost':
    case 'not-started':
      return <LostPage />
    default:
      return assertNever(page)
  }
}

function PanelOf({ name }: { readonly name: PanelName }): ReactNode {
  switch (name) {
    case 'more':
      return <MorePanel />
    case 'note':
      return <NotePanel />
    case 'ask':
      return <AskPanel />
    case 'trail':
      return <TrailPanel />
    case 'flag':
      return <FlagPanel />
    case 'hold':
      return <HoldPanel />
    case 'hand-over':
      return <HandOverPanel />
    case 'machine':
      return <MachinePanel />
    case 'give-up':
      return <GiveUpPanel />
    case 'keys':
      return <KeysPanel />
    default:
      return assertNever(name)
  }
}

/** A cause that turned out not to be it brought the walk back here; the page says which and why. */
function RuledOut() {
  const { walk, charts, arrivedBy } = usePlayer()
  const last = walk.ruledOut.at(-1)
  if (last === undefined || last.eventId !== arrivedBy?.id) return null
  return (
    <Notice state="care" title={`Ruled out: ${causeWords(charts, walk, last.causeId).title}`} className="mt-4">
      {last.how === 'run-failed' ? 'The hand-back run failed.' : 'It was not proven.'} The walk goes on at the last check that could lead elsewhere.
    </Notice>
  )
}

/** Shared charts that are not there yet were passed over on the way here; the page says so. */
function Passed() {
  const { walk, charts } = usePlayer()
  const passed = isOpen(walk) ? passedOver(charts, walk) : []
  if (passed.length === 0) return null
  return (
    <Notice state="info" title="Passed over on the way" className="mt-4">
      {passed.map(({ title }) => title).join(', ')}: that chart is not on the bench yet.
    </Notice>
  )
}

/** What the page shows when the charts of the walk lack the place where it stands. */
function LostPage() {
  return (
    <div className="pt-6">
      <EmptyState title="This walk can’t be shown">
        Its chart lacks the place where it stands. Nothing was lost: ask the lead, or give the walk up under “More” and start again.
      </EmptyState>
    </div>
  )
}

function LostWalk() {
  return (
    <main id="content" className="corded pt-6">
      <EmptyState title="This walk has no beginning">Its log does not start with a start. Start a new walk from the bench.</EmptyState>
    </main>
  )
}
