import type { ReactNode } from 'react'
import { useEffect, useRef } from 'react'

let isFirstHeading = true

type PageHeadingProps = {
  readonly children: ReactNode
  /** Title of the browser's tab; changes with every page and every check. */
  readonly tab: string
  /** Changes when the page is another one though the component stays (the node of a walk). Then the focus moves here again. */
  readonly focusKey?: string
  readonly className?: string
}

/** The one h1 of a page. It takes the focus when the page changes, so that ears and keyboard start at its top. */
export function PageHeading({ children, tab, focusKey = tab, className = 'page-head' }: PageHeadingProps) {
  const heading = useRef<HTMLHeadingElement>(null)
  useEffect(() => {
    document.title = `${tab} · Pullcord`
  }, [tab])
  useEffect(() => {
    // The page that the browser itself loaded starts at its top anyway.
    if (isFirstHeading) isFirstHeading = false
    else heading.current?.focus({ preventScroll: true })
    if (window.scrollY > 0) window.scrollTo({ top: 0 })
  }, [focusKey])
  return (
    <h1 ref={heading} tabIndex={-1} className={className}>
      {children}
    </h1>
  )
}
