import type { ReactNode } from 'react'

import { PageHeading } from '#src/components/layout/page-heading.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'

type PanelProps = {
  readonly title: string
  /** What it is about: the check that waits behind it. */
  readonly over?: string
  readonly children: ReactNode
}

/** A page beside the walk's own; Back leads to the check, which waits as it was. */
export function Panel({ title, over, children }: PanelProps) {
  const { machineTitle } = usePlayer()
  return (
    <div className="w-full max-w-[46rem] grow pt-5 pb-8">
      {over !== undefined && <p className="label">{over}</p>}
      <PageHeading tab={`${title} · ${machineTitle}`} className="title mt-1 outline-none">
        {title}
      </PageHeading>
      <div className="mt-5 grid gap-5">{children}</div>
    </div>
  )
}
