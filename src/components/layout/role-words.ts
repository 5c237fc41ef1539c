import type { Role } from '#shared/trade/roles.ts'

/** What the screens call the three roles. */
export const roleWords: Readonly<Record<Role, string>> = {
  junior: 'Junior technician',
  lead: 'Lead technician',
  owner: 'Shop owner',
}
