import { Outlet, useNavigation } from 'react-router-dom'

import { LiveRegion } from '#src/components/layout/live-region.tsx'

/** Around every page: what is said to ears, and a line on top while the next page is fetched. */
export function Root() {
  const { state } = useNavigation()
  return (
    <>
      {state === 'loading' && <div aria-hidden="true" className="after-a-while fixed inset-x-0 top-0 z-30 border-t-3 border-cord" />}
      <Outlet />
      <LiveRegion />
    </>
  )
}

/** Before the first page is there: its ground and its cord. */
export function FirstPaint() {
  return <div className="corded min-h-dvh" />
}
