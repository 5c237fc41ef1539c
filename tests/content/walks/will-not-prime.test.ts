import { describe, expect, test } from 'vitest'
import { demoChart } from '#tests/content/demo-charts.ts'
import { benchAt, pump, type Bench } from './bench.ts'

/** Where nothing is wrong, check after check, from the first look to the lead. */
const good = [
  ['n1', 'full'],
  ['n1b', 'none'],
  ['n2', 'open'],
  ['n3', 'in'],
  ['n4', 'clear'],
  ['n5', 'rises'],
  ['n6', 'seal'],
  ['n7', 'in'],
  ['n8', 'no'],
  ['n9', 'in'],
  ['n10', 'flat'],
  ['n11', 'dry'],
  ['n12', 'dry'],
  ['n13', 'turns'],
  ['n14', 'full'],
  ['n15', 'in'],
] as const

/** Walks on with good answers, as far as a node. */
function goodTo(bench: Bench, node: string): Bench {
  for (const [id, outcome] of good) {
    if (bench.node === node) break
    bench.answer(id, outcome)
  }
  return bench
}

const rows = [
  ['2 outlet', 'n2', 'shut', 'p2', 'outlet-shut'],
  ['3 height', 'n3', 'over', 'p3', 'lift-too-high'],
  ['4 strainer blocked', 'n4', 'blocked', 'p4a', 'strainer-blocked'],
  ['4 strainer high', 'n4', 'high', 'p4b', 'strainer-high'],
  ['5 hump', 'n5', 'hump', 'p5a', 'hose-hump'],
  ['5 soft hose', 'n5', 'soft', 'p5b', 'suction-hose-soft'],
  ['6 coupling', 'n6', 'leak', 'p6', 'coupling-leaks'],
  ['10 flap', 'n10', 'bad', 'p10', 'flap-valve-leaks'],
  ['11 ring or plug', 'n11', 'drips', 'p11a', 'casing-leaks'],
  ['12 weep hole', 'n12', 'wet', 'p12', 'shaft-seal-leaks'],
  ['14 clogged', 'n14', 'jammed', 'p14a', 'impeller-clogged'],
  ['15 gap', 'n15', 'wide', 'p15', 'wear-plate-worn'],
] as const

describe('every row of the method reaches its causes', () => {
  test.each(rows)('row %s: water comes once it is right', (_row, node, outcome, proof, causeId) => {
    const bench = goodTo(benchAt('will-not-prime', pump), node).answer(node, outcome).answer(proof, 'gone').prove(causeId)
    expect(bench.walk).toMatchObject({ phase: 'proven', cause: { causeId, proof: { by: 'finding' } } })
    expect(bench.walk.metal).toMatchObject({ engine: 'running', open: ['warm'] })
  })

  test.each([
    ['11 crack', 'n11', 'crack', 'p11b', 'casing-cracked'],
    ['13 impeller stands', 'n13', 'stands', 'p13', 'impeller-loose'],
    ['14 worn', 'n14', 'worn', 'p14b', 'impeller-worn'],
  ] as const)('row %s: seen a second time', (_row, node, outcome, proof, causeId) => {
    const bench = goodTo(benchAt('will-not-prime', pump), node).answer(node, outcome).answer(proof, 'seen').prove(causeId)
    expect(bench.walk).toMatchObject({ phase: 'proven', cause: { causeId } })
  })

  test('row 1: an empty casing is filled first and never run dry, and the weep hole is looked at before the cause is named', () => {
    const bench = benchAt('will-not-prime', pump).answer('n1', 'empty')
    // The step to fill it stands on the page of the proof.
    expect(bench.page()).toMatchObject({ kind: 'caution' })
    bench.answer('p1', 'gone').step('x1s').prove('started-dry')
    expect(bench.walk.trail.map(({ position }) => position.node)).toEqual(['n1', 'x1', 'p1', 'x1s'].map((id) => `will-not-prime/${id}`))
  })

  test('row 1b: water that comes at once cannot be reproduced; something else is picked', () => {
    expect(benchAt('will-not-prime', pump).answer('n1', 'full').answer('n1b', 'comes').page()).toMatchObject({ kind: 'ask', reason: 'could-not-reproduce' })
    expect(benchAt('will-not-prime', pump).answer('n1', 'full').answer('n1b', 'other').page()).toMatchObject({ kind: 'pick' })
  })

  test('row 7: a governor set short is proved here, a weak engine goes on at full speed', () => {
    const slow = () => goodTo(benchAt('will-not-prime', pump), 'n7').answer('n7', 'low')
    expect(slow().answer('n7b', 'short').answer('p7', 'gone').prove('governor-low').walk).toMatchObject({ cause: { causeId: 'governor-low' } })
    expect(slow().answer('n7b', 'open').walk.node).toBe('no-full-speed/n2')
  })

  test('row 8: a pump that primes from a bucket sends back to lift, strainer, hose and couplings, once, then to the lead', () => {
    const bench = goodTo(benchAt('will-not-prime', pump), 'n8').answer('n8', 'primes')
    expect(bench.node).toBe('n3x')
    bench.answer('n3x', 'in').answer('n4x', 'clear').answer('n5x', 'rises')
    expect(bench.answer('n6x', 'leak').answer('p6x', 'still').page()).toMatchObject({ kind: 'ask', reason: 'no-cause-found' })
  })

  test('row 9: suction that is never reached leads past flap and casing to the seal', () => {
    const at = (outcome: string) => goodTo(benchAt('will-not-prime', pump), 'n9').answer('n9', outcome).node
    expect([at('in'), at('falls'), at('low')]).toEqual(['n10', 'n10', 'n12'])
  })

  test('row 16: with everything good the lead is asked', () => {
    expect(goodTo(benchAt('will-not-prime', pump), 'a1').page()).toMatchObject({ kind: 'ask', reason: 'no-cause-found' })
  })
})

describe('cautions', () => {
  test('of the unknown liquid, the scald and the dry seal stand before the fill plug is opened', () => {
    const bench = benchAt('will-not-prime', pump).answer('n1', 'full')
    expect(bench.cautionPages[0]).toMatchObject({
      node: 'will-not-prime/n1',
      ids: expect.arrayContaining(['liquid', 'scald', 'dry', 'hot', 'co', 'lead']) as unknown,
    })
  })

  test('of the lead and the liquid stand wherever the casing is open', () => {
    const open = demoChart('will-not-prime').nodes.filter(({ needs }) => needs?.some((id) => id === 'casing-open') === true)
    expect(open.length).toBeGreaterThan(6)
    for (const node of open) expect(node.cautions, node.id).toEqual(expect.arrayContaining(['lead', 'liquid']))
  })
})

test('no run of the pump is longer than a minute, and none against a blank longer than 30 s', () => {
  for (const node of demoChart('will-not-prime').nodes) {
    if (node.machine !== 'running' || node.id === 'n7') continue
    expect(node.timer?.rule, node.id).toBe('at-most')
    expect(node.timer?.seconds, node.id).toBeLessThanOrEqual(node.cautions?.some((id) => id === 'scald') === true ? 30 : 60)
  }
})

test('a casing that is open is charged once for all that is looked at in it', () => {
  const bench = goodTo(benchAt('will-not-prime', pump), 'a1')
  const minutesAt = (id: string) => bench.walk.trail.filter(({ position }) => position.node === `will-not-prime/${id}`).map(({ minutes }) => minutes)
  // 1 of its own, 12 + 12 for the casing, 0.5 + 0.5 for the lead, which the run at the weep hole had put back.
  expect(minutesAt('n13')).toEqual([26])
  expect(minutesAt('n14')).toEqual([1])
  expect(minutesAt('n15')).toEqual([3])
})
