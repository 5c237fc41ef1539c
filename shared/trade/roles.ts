/** Roles from the lowest up; a higher one has all the powers of the lower ones. */
export const roles = ['junior', 'lead', 'owner'] as const
/** One of the three roles of a person of the shop. */
export type Role = (typeof roles)[number]

/** Whether a person of role `has` may do what asks for role `needed`. */
export function hasRole(has: Role, needed: Role): boolean {
  return roles.indexOf(has) >= roles.indexOf(needed)
}
