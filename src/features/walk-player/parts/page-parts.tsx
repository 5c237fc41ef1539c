import type { ReactNode } from 'react'

import type { Entering, NodeWords, StepLineWords } from '#shared/walk/page.ts'
import { Tie } from '#src/components/knots/cord.tsx'
import type { KnotKind } from '#src/components/knots/knot.tsx'
import { PageHeading } from '#src/components/layout/page-heading.tsx'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { formatMinutes } from '#src/lib/format.ts'

type SheetProps = {
  /** What is asked, and all that helps to answer it. */
  readonly what: ReactNode
  /** The answers: low on a phone, in reach of the thumb; the right column where there is room for two. */
  readonly answers: ReactNode
}

/** One page of the walk: the question above or to the left, the answers below or to the right. */
export function Sheet({ what, answers }: SheetProps) {
  return (
    <div className="grid grow grid-rows-[auto_1fr] gap-y-6 pt-4 pb-5 lg:grid-cols-[minmax(0,1fr)_minmax(0,1fr)] lg:grid-rows-1 lg:gap-x-12 lg:pt-6 lg:pb-6">
      <div className="max-w-words min-w-0">{what}</div>
      <div className="flex min-w-0 flex-col justify-end">{answers}</div>
    </div>
  )
}

type PageHeadProps = {
  readonly knot: KnotKind
  /** Condensed capitals over the title: kind and number, minutes, state of the machine. */
  readonly over: readonly (string | null)[]
  readonly title: string
  /** What the browser's tab says; the title when it is left out. */
  readonly tab?: string
  /** Part of a page that has several, one after the other. */
  readonly stage?: string
}

/** The head of a page: its knot on the cord, what it is, and its one h1, which takes the focus when the page appears. */
export function PageHead({ knot, over, title, tab = title, stage = '' }: PageHeadProps) {
  const { pageKey, machineTitle } = usePlayer()
  return (
    <div className="relative">
      <Tie kind={knot} look="current" size={22} at="top-6" />
      <p className="label">{over.filter((part) => part !== null && part !== '').join(' · ')}</p>
      <PageHeading tab={`${tab} · ${machineTitle}`} focusKey={`${pageKey}${stage}`} className="title mt-1 outline-none">
        {title}
      </PageHeading>
    </div>
  )
}

/** "Check 7", "Reading 2", "Prove it 9d"; the kind alone where the node has no number. */
export function toKindWords(kind: 'check' | 'reading' | 'proof' | 'step', number: string): string {
  const words = { check: 'Check', reading: 'Check', proof: 'Prove it', step: 'Step' }[kind]
  return number === '' ? words : `${words} ${number}`
}

/** Minutes of the page: its own and those of what has to come off for it. */
export function toMinutesWords(own: number, opening: number): string | null {
  const all = own + opening
  return all === 0 ? null : formatMinutes(all)
}

export function toMachineWords(machine: Entering['machine']): string | null {
  return machine === null ? null : machine === 'running' ? 'engine running' : 'engine stopped'
}

/** What has to be done before the question can be answered: what comes off, what goes back on, then the steps, in this order. */
export function DoFirst({ entering, lines }: { readonly entering: Entering; readonly lines: readonly StepLineWords[] }) {
  const { opens, closes, defeats, restores, waitMinutes } = entering
  if (opens.length + closes.length + defeats.length + restores.length + lines.length === 0) return null
  return (
    <dl className="mb-4 grid gap-y-2 border-b border-hair pb-3">
      {closes.length > 0 && <DoFirstRow lead="Back on">{closes.map(({ title }) => title).join(', ')}</DoFirstRow>}
      {restores.length > 0 && <DoFirstRow lead="Put back">{restores.map(toWordsOfId).join(', ')}</DoFirstRow>}
      {opens.length > 0 && (
        <DoFirstRow lead="What’s off">
          {opens.map(({ accessId, title, minutes, trap }) => (
            <span key={accessId} className="block">
              {title}
              {minutes > 0 && <span className="text-small whitespace-nowrap text-ink-2"> {formatMinutes(minutes)}</span>}
              {trap !== null && (
                <StateMark state="care" className="block! text-small">
                  {trap}
                </StateMark>
              )}
            </span>
          ))}
          {waitMinutes > 0 && <span className="block text-small text-ink-2">About {formatMinutes(waitMinutes)} by the clock. Nobody has to stand by.</span>}
        </DoFirstRow>
      )}
      {lines.length > 0 && (
        <DoFirstRow lead="Do first">
          {lines.map((line) => (
            <span key={line.place} className="block">
              {line.title}
              {line.do !== null && <span className="block text-small text-ink-2">{line.do}</span>}
            </span>
          ))}
        </DoFirstRow>
      )}
      {defeats.length > 0 && (
        <DoFirstRow lead="Out of action">
          <StateMark state="care">{defeats.map(toWordsOfId).join(', ')} during this test only</StateMark>
        </DoFirstRow>
      )}
    </dl>
  )
}

function DoFirstRow({ lead, children }: { readonly lead: string; readonly children: ReactNode }) {
  return (
    <div className="grid grid-cols-[5.5rem_1fr] items-baseline gap-x-3 md:grid-cols-[7rem_1fr]">
      <dt className="label text-cord!">{lead}</dt>
      <dd>{children}</dd>
    </div>
  )
}

/** Safety parts have ids and no titles: "spark-screen" is read as "spark screen". */
export function toWordsOfId(id: string): string {
  return id.replaceAll(/[-_.]+/g, ' ')
}

/** The act before the question, what good looks like, why it is asked, and with what. */
export function NodeHelp({ node, showGood = true }: { readonly node: NodeWords; readonly showGood?: boolean }) {
  return (
    <>
      {node.do !== null && <p className="mt-3">{node.do}</p>}
      {showGood && node.good !== null && (
        <div className="mt-4 border-l-4 border-good py-0.5 pl-3">
          <p className="label text-good!">What good looks like</p>
          <p>{node.good}</p>
        </div>
      )}
      {node.picture?.alt !== undefined && <p className="mt-3 border border-hair bg-well p-3 text-small text-ink-2">{node.picture.alt}</p>}
      {(node.why !== null || node.tools.length > 0) && (
        <div className="mt-4 grid gap-1 text-small text-ink-2">
          {node.why !== null && <p>{node.why}</p>}
          {node.tools.length > 0 && <p>With: {node.tools.join(', ')}</p>}
        </div>
      )}
    </>
  )
}
