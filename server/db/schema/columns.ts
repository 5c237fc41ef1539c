import { timestamp } from 'drizzle-orm/pg-core'

/** A moment, kept with its zone and read as a `Date`; milliseconds, since one of the two engines has no finer clock. */
export function moment(name: string) {
  return timestamp(name, { withTimezone: true, precision: 3, mode: 'date' })
}
