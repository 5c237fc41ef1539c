import { z } from 'zod'

/** Narrow no-break space: groups digits without breaking the line. */
export const narrowSpace = '\u202f'
/** No-break space: keeps a unit on the line of its value. */
export const noBreakSpace = '\u00a0'

/** How the shop writes numbers. `group` parts thousands: a space, the sign that is not the decimal mark, an apostrophe, or nothing. */
export const numberFormatSchema = z
  .strictObject({ decimal: z.enum(['.', ',']), group: z.enum(['space', '.', ',', "'", 'none']) })
  .refine(({ decimal, group }) => decimal !== group, 'The decimal mark and the mark between thousands must differ.')
/** How the shop writes numbers. */
export type NumberFormat = z.infer<typeof numberFormatSchema>

/** The format of a shop that has not chosen one: 9 850 and 0.584. */
export const defaultNumberFormat: NumberFormat = { decimal: '.', group: 'space' }
