import type { HeldPage as Held, HoldPage as Page } from '#shared/walk/page.ts'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { RuledPairs } from '#src/components/ui/ruled.tsx'
import { CloseActs } from '#src/features/walk-player/parts/close-acts.tsx'
import { HoldForm } from '#src/features/walk-player/parts/hold-form.tsx'
import { NodeHelp, PageHead, Sheet, toWordsOfId } from '#src/features/walk-player/parts/page-parts.tsx'

/** The chart says that the machine is not safe to hand back. */
export function HoldPage({ page }: { readonly page: Page }) {
  return (
    <Sheet
      what={
        <>
          <PageHead knot="hold" over={['Hold', page.cause?.title ?? null]} title={page.node.title} />
          <p className="mt-3">It leaves the shop only tagged, disabled, and with the owner’s signature that they were told.</p>
          <NodeHelp node={page.node} />
        </>
      }
      answers={<HoldForm why={page.cause?.title ?? ''} />}
    />
  )
}

/** Held: tagged, not to be used. */
export function HeldPage({ page }: { readonly page: Held }) {
  return (
    <Sheet
      what={
        <>
          <PageHead knot="hold" over={['Hold', page.cause?.title ?? null]} title="Held: not safe to hand back" />
          <RuledPairs
            className="mt-4"
            pairs={[
              { name: 'Tag number', value: <span className="figures">{page.tagNo}</span> },
              { name: 'Why', value: page.why },
              ...(page.defeated.length === 0
                ? []
                : [{ name: 'Out of action', value: <StateMark state="bad">{page.defeated.map(toWordsOfId).join(', ')}</StateMark> }]),
            ]}
          />
        </>
      }
      answers={<CloseActs results={page.results} />}
    />
  )
}
