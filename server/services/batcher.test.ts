import { describe, expect, test } from 'vitest'
import { createBatcher } from './batcher.ts'

/** Work that is under way until the test lets it end. */
function createDesk() {
  const batches: (readonly string[])[] = []
  const ends: (() => void)[] = []
  const ask = createBatcher(async (items: readonly string[]) => {
    batches.push(items)
    await new Promise<void>((resolve) => ends.push(resolve))
    if (items.includes('bad')) throw new Error('This one breaks them all.')
    return items.map((item) => item.toUpperCase())
  })
  const end = async () => {
    ends.shift()?.()
    await new Promise((resolve) => setTimeout(resolve))
  }
  return { ask, batches, end }
}

describe('work that goes to the database in company', () => {
  test('goes at once when nothing is under way, and together with whoever came meanwhile when something is', async () => {
    const { ask, batches, end } = createDesk()
    const answers = [ask('a'), ask('b'), ask('c')]
    expect(batches).toEqual([['a']])
    await end()
    expect(batches).toEqual([['a'], ['b', 'c']])
    await end()
    expect(await Promise.all(answers)).toEqual(['A', 'B', 'C'])
    const later = ask('d')
    expect(batches.at(-1)).toEqual(['d'])
    await end()
    expect(await later).toBe('D')
  })

  test('fails together, and the next ones do not notice', async () => {
    const { ask, end } = createDesk()
    const first = ask('a')
    const failing = [ask('bad'), ask('beside it')].map((answer) => answer.catch((error: Error) => error.message))
    await end()
    await end()
    expect([await first, ...(await Promise.all(failing))]).toEqual(['A', 'This one breaks them all.', 'This one breaks them all.'])
    const later = ask('e')
    await end()
    expect(await later).toBe('E')
  })
})
