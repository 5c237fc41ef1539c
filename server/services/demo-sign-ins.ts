import type { Role } from '#shared/trade/roles.ts'

/** The invented people of the demo shop. Their passwords are public, so these sign-ins are refused with NODE_ENV=production. */
export const demoSignIns: readonly { readonly name: string; readonly role: Role; readonly email: string; readonly password: string }[] = [
  { name: 'Maren Holloway', role: 'owner', email: 'maren@alder-row.example', password: 'late frost on the yard' },
  { name: 'Tobias Renk', role: 'lead', email: 'tobias@alder-row.example', password: 'three pulls then choke off' },
  { name: 'Ivy Castellan', role: 'junior', email: 'ivy@alder-row.example', password: 'new gloves every friday' },
]

/** Whether an e-mail address belongs to the demo shop. */
export function isDemoEmail(email: string): boolean {
  return demoSignIns.some((one) => one.email === email.toLowerCase())
}
