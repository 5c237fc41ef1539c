import type { ReactNode } from 'react'
import { useEffect, useRef } from 'react'
import { Link } from 'react-router-dom'

import type { ChecksLeft } from '#shared/walk/checks-left.ts'
import { checksLeft } from '#shared/walk/checks-left.ts'
import type { WalkPage } from '#shared/walk/page.ts'
import { backTo, knots } from '#shared/walk/select.ts'
import { isOpen } from '#shared/walk/state.ts'
import { Knot, knotWords } from '#src/components/knots/knot.tsx'
import { DemoBanner } from '#src/components/layout/demo-banner.tsx'
import { useShell } from '#src/components/layout/shell-context.ts'
import { SkipLink } from '#src/components/layout/top-bar.tsx'
import { Button } from '#src/components/ui/button.tsx'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import type { PanelName } from '#src/features/walk-player/player-context.ts'
import { useIsHere, usePlayer } from '#src/features/walk-player/player-context.ts'
import { toLineWords } from '#src/lib/walk-words.ts'
import { toSavedWords } from '#src/features/walk-player/words.ts'
import { formatMinutes } from '#src/lib/format.ts'
import { paths } from '#src/lib/paths.ts'
import { useShortcut } from '#src/lib/shortcuts.ts'
import type { SavedState } from '#src/lib/walk-log.ts'

type FrameProps = {
  readonly saved: SavedState
  readonly onRetry: () => void
  /** The page beside the walk's own that is open. */
  readonly panel: PanelName | null
  /** What was set aside, and what was refused. */
  readonly notices: ReactNode
  readonly children: ReactNode
}

/**
 * Around every page of a walk: the way back, where the walk stands, what was just recorded, and whether it is saved. The foot stays in
 * sight while the page scrolls above it, so that nothing ever lies behind it.
 */
export function Frame({ saved, onRetry, panel, notices, children }: FrameProps) {
  const { isDemo } = useShell()
  const { pageKey } = usePlayer()
  const shown = panel ?? pageKey
  const sheet = useRef<HTMLDivElement>(null)
  useEffect(() => {
    if (sheet.current !== null) sheet.current.scrollTop = 0
  }, [shown])
  return (
    <div data-mode="bench" className="flex min-h-dvh flex-col [@media(min-height:520px)]:h-dvh">
      <SkipLink />
      <div ref={sheet} className="flex min-h-0 grow flex-col overflow-x-hidden [@media(min-height:520px)]:overflow-y-auto">
        {isDemo && (
          <div className="order-last md:order-none">
            <DemoBanner isAtCheck />
          </div>
        )}
        <header>
          <Header panel={panel} />
          {panel === null && <Strip />}
          {panel === null && <Undo />}
        </header>
        <main id="content" key={shown} className="corded flex grow flex-col">
          {notices}
          {children}
        </main>
      </div>
      <Foot saved={saved} onRetry={onRetry} panel={panel} />
    </div>
  )
}

function Header({ panel }: { readonly panel: PanelName | null }) {
  const { walk, machineTitle } = usePlayer()
  return (
    <div className="border-b border-rule bg-card [--knot-ground:var(--card)] [--mark-ground:var(--card)]">
      <div className="corded flex min-h-(--bar-height) items-stretch justify-between gap-x-4">
        <BackButton panel={panel} />
        <p className="ml-auto min-w-0 self-center truncate text-small font-medium">{machineTitle}</p>
        <p className="label shrink-0 self-center">{formatMinutes(walk.minutesUsed)} used</p>
      </div>
    </div>
  )
}

const backClass = 'flex min-h-14 items-center gap-2 pr-3 text-[1.125rem] font-medium no-underline hover:underline hover:underline-offset-4'

function BackButton({ panel }: { readonly panel: PanelName | null }) {
  const { closePanel, walk, charts, stepBack, tap } = usePlayer()
  const isHere = useIsHere()
  const line = isHere && isOpen(walk) && !walk.isPaused ? backTo(charts, walk) : null
  const goBack = (): void => {
    if (panel !== null) closePanel()
    else if (line !== null) tap(() => stepBack(line, 'Stepped back.'))
  }
  useShortcut(panel === null && line === null ? null : 'Backspace', 'Back', goBack)
  if (panel === null && line === null) {
    return (
      <Link to={paths.bench()} className={backClass}>
        <Chevron />
        Bench
      </Link>
    )
  }
  return (
    <button type="button" onClick={goBack} className={backClass}>
      <Chevron />
      Back
    </button>
  )
}

function Chevron() {
  return (
    <svg viewBox="0 0 10 16" aria-hidden="true" className="h-4 w-2.5">
      <path d="M8.5 1.5 2 8l6.5 6.5" fill="none" stroke="currentColor" strokeWidth="2" />
    </svg>
  )
}

/** The knots of the trail and how many checks are left. A strip of its own, so that the walk is seen to get somewhere. */
function Strip() {
  const { walk, charts, page } = usePlayer()
  // On a phone the pad needs the room more.
  const givesWay = hasPad(page) && isOpen(walk) && backTo(charts, walk) !== null
  const tied = knots(charts, walk)
  const words = toLeftWords(page, isOpen(walk) ? checksLeft(charts, walk) : null)
  return (
    <div className={`border-b border-hair ${givesWay ? 'max-md:hidden' : ''}`}>
      <div className="corded flex min-h-11 items-center justify-between gap-4">
        <ol aria-label="Trail so far" className="flex min-w-0 items-center justify-end overflow-hidden">
          {tied.map(({ place, kind, number, title, isHere, eventId }, index) => (
            <li
              key={`${eventId ?? ''} ${place} ${isHere}`}
              className={`relative px-1 before:absolute before:inset-x-0 before:top-1/2 before:-translate-y-px before:border-t-2 before:border-cord ${toKnotClass(tied.length - index)}`}
            >
              <Knot
                kind={kind}
                look={isHere ? 'current' : 'outline'}
                size={18}
                label={`${knotWords[kind]} ${number}: ${title}${isHere ? ', here' : ''}`}
                className="relative"
              />
            </li>
          ))}
        </ol>
        {words !== null && <p className="label shrink-0">{words}</p>}
      </div>
    </div>
  )
}

/** Whether a value is typed on the page. */
function hasPad(page: WalkPage): boolean {
  return page.kind === 'reading' || ((page.kind === 'proof' || page.kind === 'before') && page.judging !== null)
}

/** The youngest knots stay where there is no room for all. */
function toKnotClass(fromEnd: number): string {
  if (fromEnd > 24) return 'hidden'
  if (fromEnd > 14) return 'hidden lg:block'
  return fromEnd > 5 ? 'hidden md:block' : 'block'
}

function toLeftWords(page: WalkPage, left: ChecksLeft | null): string | null {
  if (page.kind === 'caution') return page.guards.number === '' ? 'before you go on' : `before check ${page.guards.number}`
  if (left === null || left.longest === 0) return null
  const { shortest, longest, isAtLeast } = left
  if (isAtLeast) return `at least ${Math.max(1, shortest)} ${shortest > 1 ? 'checks' : 'check'} left`
  if (longest === 1) return 'last check'
  return shortest === longest ? `${longest} checks left` : `${shortest} to ${longest} checks left`
}

/** What was just recorded, with its way back, until the next finding. */
function Undo() {
  const { walk, charts, format, stepBack, tap } = usePlayer()
  const isHere = useIsHere()
  const line = isHere && isOpen(walk) && !walk.isPaused ? backTo(charts, walk) : null
  const entry = line === null ? undefined : walk.trail.find(({ eventId }) => eventId === line)
  if (line === null || entry === undefined) return null
  const { node, found } = toLineWords({ charts, walk, format }, entry)
  return (
    <div className="border-b border-hair bg-cord-wash">
      <div className="corded flex min-h-14 items-center justify-between gap-3">
        <p className="min-w-0 text-small leading-5">
          <span className="line-clamp-2">
            {node.number !== '' && <span className="figures mr-2 text-ink-2">{node.number}</span>}
            <span className="font-medium">{entry.kind === 'finding' ? found : `${node.title}: ${found.toLowerCase()}`}</span>
          </span>
        </p>
        <Button look="plain" onClick={() => tap(() => stepBack(line, `Undone: ${found}.`))} className="shrink-0">
          Undo
        </Button>
      </div>
    </div>
  )
}

const footClass = 'flex min-h-14 min-w-14 items-center pr-3 font-medium sm:pr-0 hover:underline hover:underline-offset-4 aria-expanded:underline aria-expanded:underline-offset-4'

function Foot({ saved, onRetry, panel }: Pick<FrameProps, 'saved' | 'onRetry' | 'panel'>) {
  const { page, openPanel, noAnswer, walk } = usePlayer()
  const isPlain = useIsHere() && panel === null
  const isPad = isPlain && hasPad(page)
  useShortcut(isPlain ? 'n' : null, 'Write a note', () => openPanel('note'))
  useShortcut(isPlain ? '?' : null, 'List of keys', () => openPanel('keys'))
  useShortcut(isPad ? '0' : null, 'No answer', noAnswer.toggle)
  const isLost = saved.kind === 'waiting' || saved.kind === 'stuck'
  return (
    <footer className="border-t border-rule bg-card [--mark-ground:var(--card)]">
      {isLost && <LostBar saved={saved} onRetry={onRetry} />}
      <div className="corded flex min-h-14 flex-wrap items-center justify-between gap-x-2">
        <nav aria-label="Beside the check" className="flex flex-wrap text-[1rem] sm:gap-x-8 sm:text-[1.125rem]">
          {isPlain && page.kind === 'caution' && <Unsafe />}
          {isPad && (
            <button type="button" aria-expanded={noAnswer.isOpen} onClick={noAnswer.toggle} className={footClass}>
              No answer
            </button>
          )}
          {isPlain && page.kind !== 'caution' && (
            <>
              <button type="button" onClick={() => openPanel('note')} className={footClass}>
                Note
              </button>
              {!walk.isPaused && (
                <button type="button" onClick={() => openPanel('ask')} className={footClass}>
                  Ask<span className="max-sm:for-ears">&nbsp;the lead</span>
                </button>
              )}
            </>
          )}
          {panel === null && (
            <button type="button" onClick={() => openPanel('more')} className={footClass}>
              More
            </button>
          )}
          {panel !== null && <BackToCheck />}
        </nav>
        <Saved saved={saved} />
      </div>
    </footer>
  )
}

function BackToCheck() {
  const { closePanel } = usePlayer()
  return (
    <button type="button" onClick={closePanel} className={footClass}>
      Back to the walk
    </button>
  )
}

/** Whoever can't make it safe leaves the check, or asks where it can't be left. */
function Unsafe() {
  const { page, record, tap, openPanel } = usePlayer()
  if (page.kind !== 'caution') return null
  const leave = (): void => {
    if (page.canSkip)
      record(
        [{ type: 'check-skipped', payload: { node: page.guards.place, why: 'cannot', note: 'Could not be made safe.' } }],
        'Left out: could not be made safe.',
      )
    else openPanel('ask')
  }
  return (
    <button type="button" onClick={() => tap(leave)} className={footClass}>
      Can’t make it safe
    </button>
  )
}

function Saved({ saved }: { readonly saved: SavedState }) {
  const state = saved.kind === 'saved' ? 'good' : saved.kind === 'sending' ? 'info' : 'care'
  return (
    <StateMark state={state} look="caps" className="min-h-6 items-center! whitespace-nowrap">
      {toSavedWords(saved)}
    </StateMark>
  )
}

/** A lost server shows a bar, never a block: what was tapped is here, and the walk goes on. */
function LostBar({ saved, onRetry }: { readonly saved: Extract<SavedState, { kind: 'waiting' | 'stuck' }>; readonly onRetry: () => void }) {
  return (
    <div role="status" className="border-b border-hair bg-care-wash [--mark-ground:var(--care-wash)]">
      <div className="corded flex flex-wrap items-center justify-between gap-x-4">
        <p className="min-w-0 flex-1 basis-48 py-2 text-small leading-5">
          <StateMark state="care">{saved.kind === 'waiting' ? `${saved.count} not sent yet` : 'not saved'}</StateMark>: {saved.why}{' '}
          {saved.kind === 'waiting' ? 'Go on: it is sent by itself.' : 'Leave this page open.'}
        </p>
        <Button look="plain" onClick={onRetry}>
          Try now
        </Button>
      </div>
    </div>
  )
}
