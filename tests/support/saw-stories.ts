import { answer, proven, repaired, revs, started, tap } from './walk-builder.ts'

/** The symptom shows. */
export const toReading = [started(), tap('yes')]
/** Full speed is low. */
export const toFilter = [...toReading, revs(9850)]
/** No light comes through the filter. */
export const toProof = [...toFilter, tap('dark')]
/** Full speed is back without it. */
export const toCause = [...toProof, revs(12_400)]
/** The filter is the cause. */
export const toProven = [...toCause, proven]
/** It was cleaned. */
export const toRepaired = [...toProven, repaired]
/** A cause that makes the machine unsafe, proven by a second look. */
export const toUnsafe = [...toReading, revs(12_000), tap('stripe'), answer({ outcome: 'gone' as never, note: 'Worn thin' }), proven]
