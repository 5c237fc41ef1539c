import { createContext, use } from 'react'

import type { Role } from '#shared/trade/roles.ts'

export type NavItem = { readonly to: string; readonly words: string }

/** What every signed-in screen shows around its content; handed in by the route that checked the session. */
export type Shell = {
  readonly shopName: string
  readonly person: { readonly name: string; readonly role: Role }
  readonly nav: readonly NavItem[]
  readonly isDemo: boolean
  readonly onSignOut: () => void
  /** Why signing out did not work; `null` when nothing is wrong. */
  readonly signOutProblem: string | null
}

export const ShellContext = createContext<Shell | null>(null)

export function useShell(): Shell {
  const shell = use(ShellContext)
  if (shell === null) throw new Error('This screen stands outside the signed-in part of the router.')
  return shell
}
