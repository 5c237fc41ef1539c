import { getRounds } from 'bcryptjs'

/** Work factor of bcrypt: each step doubles the time of a guess. */
export const bcryptCost = 12

/** The hash of a secret that nobody has, at the present cost: what a password is checked against when there is no account. */
export const dummyHash = '$2b$12$0X5YirbEh7qw.Eorm..XQ.eIPs5LOCiH.2xiIa0GP83ASmIUGptU6'

/** Whether a stored hash was made at a lower cost than today's. */
export function needsNewHash(hash: string): boolean {
  return getRounds(hash) < bcryptCost
}
