import { expect, test } from 'vitest'

import { handBackRun } from '#shared/trade/hand-back-run.ts'
import { bothHands } from '#tests/support/browser.ts'

import { proveThePlug, saw } from './routes.ts'
import { shopOfFile } from './shop.ts'

const shop = shopOfFile()

test.each(bothHands)('ten checks from full speed missing to a fouled plug cost at most 20 taps, and at most 8 more with one per item of the run close the walk, $words', async (hands) => {
  const ivy = await shop.seat('junior', hands)
  await ivy.startWalk('Won’t reach full speed', saw)
  const before = await ivy.taps()
  await proveThePlug(ivy)
  const toTheCause = (await ivy.taps()) - before

  await ivy.tick(/Fit a new plug/)
  await ivy.tick(/Spark plug/)
  await ivy.answer('Fix done')
  const items = await ivy.tickRun('12400')
  await ivy.answer('It runs right')
  await ivy.sees('It runs right')
  await ivy.answer('Close: repaired')
  await ivy.sees('Repaired')
  const toTheEnd = (await ivy.taps()) - before - toTheCause

  expect(items).toBe(handBackRun('chain-saw').length)
  // Keys are no taps: what the thumb did is counted.
  if (hands.by === 'touch') {
    expect({ toTheCause, toTheEnd }).toEqual({ toTheCause: 15, toTheEnd: items + 6 })
    expect(toTheCause).toBeLessThanOrEqual(20)
    expect(toTheEnd).toBeLessThanOrEqual(items + 8)
  }
  await ivy.isSaved()
  await ivy.leaves()
})
