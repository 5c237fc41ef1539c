import { useMemo, useState } from 'react'
import { Navigate, Outlet, useLocation } from 'react-router-dom'

import { hasRole } from '#shared/trade/roles.ts'
import type { Role } from '#shared/trade/roles.ts'
import { useSession, useSessionWatch, useSignOut } from '#src/api/session.ts'
import type { NavItem, Shell } from '#src/components/layout/shell-context.ts'
import { ShellContext } from '#src/components/layout/shell-context.ts'
import { paths } from '#src/lib/paths.ts'
import { toWords } from '#src/lib/problem-words.ts'

const surfaces: readonly (NavItem & { readonly role: Role })[] = [
  { to: paths.bench(), words: 'Bench', role: 'junior' },
  { to: paths.walks(), words: 'Walks', role: 'junior' },
  { to: paths.charts(), words: 'Charts', role: 'junior' },
  { to: paths.people(), words: 'People', role: 'owner' },
]

/** Around every screen that wants somebody signed in; when the session ends it leads to the sign-in page and back here. */
export function Component() {
  useSessionWatch()
  const { pathname, search } = useLocation()
  const session = useSession().data
  const signOut = useSignOut()
  const [isLeaving, setLeaving] = useState(false)
  const person = session?.person ?? null
  const problem = signOut.error === null ? null : toWords(signOut.error)
  const leave = signOut.mutate

  const shell = useMemo<Shell | null>(
    () =>
      session === undefined || person === null
        ? null
        : {
            shopName: session.shop.name,
            person,
            nav: surfaces.filter(({ role }) => hasRole(person.role, role)),
            isDemo: session.demoSignIns.length > 0,
            signOutProblem: problem,
            onSignOut: () => {
              setLeaving(true)
              leave(undefined, { onError: () => setLeaving(false) })
            },
          },
    [session, person, problem, leave],
  )

  if (shell === null) return <Navigate to={paths.signIn(isLeaving ? undefined : `${pathname}${search}`)} replace />
  return (
    <ShellContext value={shell}>
      <Outlet />
    </ShellContext>
  )
}
