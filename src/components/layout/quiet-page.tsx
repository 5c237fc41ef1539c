import type { ReactNode } from 'react'

import { Tie } from '#src/components/knots/cord.tsx'
import type { KnotKind } from '#src/components/knots/knot.tsx'

import { PageHeading } from './page-heading.tsx'

type QuietPageProps = {
  /** Small capitals over the heading: the shop, or the product where no shop is known yet. */
  readonly over: string
  readonly title: string
  readonly knot?: KnotKind
  readonly children: ReactNode
  /** A second column on wide screens, below the first on narrow ones. */
  readonly beside?: ReactNode
  readonly banner?: ReactNode
}

/** A page outside the signed-in part: one heading on the cord, one task. */
export function QuietPage({ over, title, knot = 'start', children, beside, banner }: QuietPageProps) {
  return (
    <div className="flex min-h-dvh flex-col">
      {banner}
      <main id="content" className="corded grow pt-10 pb-16 md:pt-[12vh]">
        <div className="grid max-w-sheet gap-x-24 gap-y-12 lg:grid-cols-[minmax(0,26.25rem)_minmax(0,1fr)]">
          <div className="max-w-[26.25rem]">
            <p className="label">{over}</p>
            <div className="relative mt-1">
              <Tie kind={knot} at="top-[1.0625rem]" size={20} />
              <PageHeading tab={title}>{title}</PageHeading>
            </div>
            <div className="mt-6">{children}</div>
          </div>
          {beside}
        </div>
      </main>
    </div>
  )
}
