/** One figure of the benchmark: a ratio to something measured in the same run, or a size. */
export type Measured = {
  readonly what: string
  readonly ratio: number
  readonly against: string
  readonly goal: { readonly atLeast: number } | { readonly atMost: number }
  readonly detail: string
}

/** The middle value of some figures. */
export function median(values: readonly number[]): number {
  const sorted = values.toSorted((left, right) => left - right)
  return sorted[Math.floor(sorted.length / 2)] ?? Number.NaN
}

/** Whether a figure meets its goal. */
export function isMet({ ratio, goal }: Measured): boolean {
  return 'atLeast' in goal ? ratio >= goal.atLeast : ratio <= goal.atMost
}

/** One line for people. */
export function toLine(measured: Measured): string {
  const { what, ratio, against, goal, detail } = measured
  const wanted = 'atLeast' in goal ? `goal: at least ${goal.atLeast}` : `goal: at most ${goal.atMost}`
  return `${isMet(measured) ? 'met    ' : 'NOT MET'}  ${what}: ${ratio.toFixed(2)} of ${against} (${wanted}; ${detail})`
}
