import type { ReactNode } from 'react'

/** The first thing that the Tab key reaches: past the bar, to the page. */
export function SkipLink() {
  return (
    <a
      href="#content"
      className="z-30 border border-rule bg-card px-4 py-2 font-medium text-cord underline not-focus:for-ears focus:fixed focus:top-2 focus:left-2"
    >
      To the page
    </a>
  )
}

type TopBarProps = {
  /** What the page is about, or the way back. */
  readonly children: ReactNode
  /** Ways to other surfaces; a row of their own on a phone. */
  readonly nav?: ReactNode
  /** Saved state, always in words. */
  readonly saved?: ReactNode
  /** Rightmost: the person, or what else belongs to the page. */
  readonly end?: ReactNode
}

/** The bar over a page: working-sheet ground, one rule below, the cord running through it. */
export function TopBar({ children, nav, saved, end }: TopBarProps) {
  return (
    <header data-screen-only className="border-b border-rule bg-card [--knot-ground:var(--card)] [--mark-ground:var(--card)]">
      <div className="corded flex min-h-(--bar-height) flex-wrap items-stretch gap-x-6 lg:gap-x-8">
        <div className="flex min-w-0 flex-1 items-center md:flex-none">{children}</div>
        {nav !== undefined && nav !== false && (
          <div className="order-last flex basis-full border-t border-hair md:order-none md:basis-auto md:border-t-0">{nav}</div>
        )}
        <div className="ml-auto flex items-stretch gap-x-5">
          {saved !== undefined && <div className="flex items-center">{saved}</div>}
          {end}
        </div>
      </div>
    </header>
  )
}
