import type { ReactNode } from 'react'
import { NavLink } from 'react-router-dom'

import { paths } from '#src/lib/paths.ts'

import { DemoBanner } from './demo-banner.tsx'
import { PageHeading } from './page-heading.tsx'
import { PersonMenu } from './person-menu.tsx'
import type { NavItem } from './shell-context.ts'
import { useShell } from './shell-context.ts'
import { SkipLink, TopBar } from './top-bar.tsx'

type AppShellProps = {
  /** The surface's name; it is the page's h1 and the tab's title. */
  readonly surface: string
  /** `bench` raises type and controls to what hands and eyes need at the bench. */
  readonly mode?: 'desk' | 'bench'
  /** Saved state, in words; a `StateMark look="caps"`. */
  readonly saved?: ReactNode
  readonly children: ReactNode
  readonly className?: string
}

/** The frame of a signed-in screen: top bar with shop, surface, ways, saved state and person; below it the page on its cord. */
export function AppShell({ surface, mode = 'desk', saved, children, className = '' }: AppShellProps) {
  const { shopName, nav, isDemo } = useShell()
  return (
    <div className="flex min-h-dvh flex-col">
      <SkipLink />
      {isDemo && <DemoBanner />}
      <TopBar end={<PersonMenu />} saved={saved} nav={nav.length > 1 && <MainNav items={nav} />}>
        <div className="grid min-w-0 py-1.5 xl:flex xl:items-baseline xl:gap-2">
          <span className="label truncate text-ink-2! xl:font-condensed xl:text-[1.5rem] xl:leading-8 xl:tracking-normal xl:text-ink!">{shopName}</span>
          <span aria-hidden="true" className="hidden font-condensed text-[1.5rem] leading-8 font-semibold xl:inline">
            ·
          </span>
          <PageHeading tab={surface} className="font-condensed text-[1.375rem] leading-6 font-semibold uppercase xl:text-[1.5rem] xl:leading-8">
            {surface}
          </PageHeading>
        </div>
      </TopBar>
      <main id="content" data-mode={mode} className={`corded grow pb-16 ${className}`}>
        {children}
      </main>
    </div>
  )
}

function MainNav({ items }: { readonly items: readonly NavItem[] }) {
  return (
    <nav aria-label="Main" className="flex flex-wrap gap-x-6 self-stretch">
      {items.map(({ to, words }) => (
        <NavLink
          key={to}
          to={to}
          end={to === paths.bench()}
          className="flex min-h-11 items-center border-y-3 border-transparent font-medium text-ink-2 hover:text-ink aria-[current=page]:border-b-cord aria-[current=page]:text-ink"
        >
          {words}
        </NavLink>
      ))}
    </nav>
  )
}
