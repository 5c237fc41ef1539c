import type { ReactNode } from 'react'

import type { Entering, NodeWords, StepLineWords } from '#shared/walk/page.ts'
import { accessOnStack } from '#shared/walk/pinned-charts.ts'
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
  /** What can wait: below the answers on a phone, beside them where there is room. */
  readonly later?: ReactNode
}

/** One page of the walk: the question above or to the left, the answers below or to the right. */
export function Sheet({ what, answers, later }: SheetProps) {
  return (
    <div
      className={`grid grow gap-x-12 gap-y-4 pt-3 pb-4 md:gap-y-6 md:pt-4 lg:grid-cols-[minmax(0,1fr)_minmax(0,1fr)] lg:pt-6 lg:pb-6 ${later === undefined ? 'grid-rows-[auto_1fr] lg:grid-rows-1' : 'grid-rows-[auto_1fr_auto] lg:grid-rows-[auto_1fr]'}`}
    >
      <div className="max-w-words min-w-0 lg:col-start-1 lg:row-start-1">{what}</div>
      <div className="flex min-w-0 flex-col justify-end lg:sticky lg:bottom-6 lg:col-start-2 lg:row-span-full lg:self-end">{answers}</div>
      {later !== undefined && <div className="max-w-words min-w-0 lg:col-start-1 lg:row-start-2">{later}</div>}
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
  const { walk, charts } = usePlayer()
  const { opens, defeats, restores, waitMinutes } = entering
  // What costs nothing to close has nothing to put back: an engine that cools down, or warms up.
  const closes = entering.closes.filter(({ accessId }) => (accessOnStack(charts, walk, accessId)?.closeMinutes ?? 0) > 0)
  if (opens.length + closes.length + defeats.length + restores.length + lines.length === 0) return null
  return (
    <dl className="mb-4 grid gap-y-2 border-b border-hair pb-3">
      {closes.length > 0 && <DoFirstRow lead="Put back">{toList(closes.map(({ title }) => toPart(title)))}</DoFirstRow>}
      {restores.length > 0 && <DoFirstRow lead="In action">{toList(restores.map(toWordsOfId))}: back in place</DoFirstRow>}
      {opens.length > 0 && (
        <DoFirstRow lead="What’s off">
          {opens.map(({ accessId, title, minutes, trap }) => (
            <span key={accessId} className="block">
              {title}
              {minutes > 0 && <span className="text-small whitespace-nowrap text-ink-2"> {formatMinutes(minutes)}</span>}
              {trap !== null && (
                <StateMark state="care" className="flex! text-small leading-5">
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

/** An access is called by what is off; put back is the part: "Clutch cover off" -> "Clutch cover". */
function toPart(title: string): string {
  return title.replace(/ (off|out)$/i, '')
}

/** "Plug lead, plug, clutch cover": the first as it is written, the others in running text. */
function toList(titles: readonly string[]): string {
  return titles.map((title, index) => (index === 0 ? title : title.charAt(0).toLowerCase() + title.slice(1))).join(', ')
}

/** Safety parts have ids and no titles: "spark-screen" is read as "spark screen". */
export function toWordsOfId(id: string): string {
  return id.replaceAll(/[-_.]+/g, ' ')
}

type NodeHelpProps = {
  readonly node: NodeWords
  /** Where limits judge, they say what good is. */
  readonly showGood?: boolean
  /** Why it is asked and with what stand elsewhere on the page. */
  readonly isShort?: boolean
}

/** The act before the question, what good looks like, why it is asked, and with what. */
export function NodeHelp({ node, showGood = true, isShort = false }: NodeHelpProps) {
  return (
    <>
      {node.do !== null && <p className={`mt-2 ${isShort ? 'max-md:text-small' : ''}`}>{node.do}</p>}
      {showGood && node.good !== null && (
        <div className="mt-4 border-l-4 border-good py-0.5 pl-3">
          <p className="label text-good!">What good looks like</p>
          <p>{node.good}</p>
        </div>
      )}
      {node.picture?.alt !== undefined && <p className="mt-3 border border-hair bg-well p-3 text-small text-ink-2">{node.picture.alt}</p>}
      {!isShort && <NodeReasons node={node} className="mt-4" />}
    </>
  )
}

/** Why it is asked, and with what it is done. */
export function NodeReasons({ node, className = '' }: { readonly node: NodeWords; readonly className?: string }) {
  if (node.why === null && node.tools.length === 0) return null
  return (
    <div className={`grid gap-1 text-small text-ink-2 ${className}`}>
      {node.why !== null && <p>{node.why}</p>}
      {node.tools.length > 0 && <p>With: {node.tools.map((tool) => tool.charAt(0).toLowerCase() + tool.slice(1)).join(', ')}</p>}
    </div>
  )
}
