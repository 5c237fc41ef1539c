import { describe, expect, test } from 'vitest'
import { ask, cause, check, proof, soundSketch, start, step } from '#tests/support/chart-builder.ts'
import { remarksOf, saysOf, vary } from '#tests/support/lint.ts'

describe('proofs', () => {
  test('name their suspect', () => {
    expect(saysOf(vary(soundSketch, { nodes: [proof('p2', 'filter-packed', { suspect: undefined })] }))).toEqual([
      'proof-without-suspect p2',
      'cause-without-proof p2.gone',
    ])
  })

  test('have exactly one outcome that confirms', () => {
    const outcomes = (first: boolean, second: boolean) => ({
      outcomes: [
        { id: 'gone', title: 'Gone', confirms: first },
        { id: 'still', title: 'Still there', confirms: second },
      ],
    })
    expect(saysOf(vary(soundSketch, { nodes: [proof('p2', 'filter-packed', outcomes(true, true))] }))).toEqual(['proof-confirming-outcomes p2'])
    expect(saysOf(vary(soundSketch, { nodes: [proof('p2', 'filter-packed', outcomes(false, false))] }))).toEqual([
      'proof-confirming-outcomes p2',
      'cause-without-proof p2.gone',
    ])
  })

  test('compare with a check or a reading, and confirm by an outcome that it has', () => {
    const comparing = (compares: object) => saysOf(vary(soundSketch, { nodes: [proof('p2', 'filter-packed', { compares })] }))
    expect(comparing({ node: 'n2', confirmsWhen: ['good'] })).toEqual([])
    expect(comparing({ node: 'n2', confirmsWhen: ['odd'] })).toEqual(['unknown-outcome p2'])
    expect(comparing({ node: 's' })).toEqual(['proof-compares-wrongly p2'])
  })
})

describe('a cause is proved before it is named', () => {
  const straight = vary(soundSketch, { without: ['p2'], drop: ['n2.bad > p2', 'p2.gone > c2', 'p2.still > ask'], edges: ['n2.bad > c2'] })

  test('a check that leads to it straight is worth a look, its proof in between mends it', () => {
    expect(saysOf(straight)).toEqual(['cause-without-proof n2.bad'])
    expect(saysOf(soundSketch)).toEqual([])
  })

  test('a step in between changes nothing', () => {
    expect(saysOf(vary(straight, { nodes: [step('w')], drop: ['n2.bad > c2'], edges: ['n2.bad > w', 'w > c2'] }))).toEqual(['cause-without-proof n2.bad'])
    expect(saysOf(vary(soundSketch, { nodes: [step('w')], drop: ['p2.gone > c2'], edges: ['p2.gone > w', 'w > c2'] }))).toEqual([])
  })

  test('the proof of another cause does not do, nor an outcome that does not confirm', () => {
    expect(saysOf(vary(soundSketch, { nodes: [proof('p2', 'screen-shut')] }))).toEqual(['cause-without-proof p2.gone'])
    expect(saysOf(vary(soundSketch, { drop: ['p2.still > ask'], edges: ['p2.still > c2'] }))).toEqual(['cause-without-proof p2.still'])
  })

  test('neither does a node that passes the walk of another machine on to it', () => {
    const passing = vary(soundSketch, { nodes: [check('n2', undefined, { onlyFor: { classes: ['chain-saw'], otherwise: 'c2' } })] })
    expect(remarksOf(passing).map(({ code, node }) => [code, node])).toEqual([
      ['cause-without-proof', 'c2'],
      ['all-good-route', 'c2'],
    ])
  })

  test('a printed table has no proofs and is spared', () => {
    expect(saysOf({ ...straight, basis: 'printed-table' })).toEqual([])
  })

  test('a cause has a fix; what only leads to causes needs none', () => {
    const bare = { id: 'filter-packed', title: 'Filter packed', system: 'air' }
    expect(saysOf({ ...soundSketch, causes: [bare] })).toEqual(['cause-without-remedy'])
    expect(saysOf({ ...soundSketch, causes: [{ id: 'never-cleaned', title: 'Never cleaned', system: 'use', contributing: true }] })).toEqual([])
  })
})

describe('a proof on a machine that was opened for the check before it', () => {
  const behindCover = check('n2', undefined, { needs: ['cover-off'] })
  test('is noted when it lists nothing that must be off', () => {
    expect(saysOf(vary(soundSketch, { nodes: [behindCover] }))).toEqual(['proof-without-access p2'])
    expect(saysOf(vary(soundSketch, { nodes: [behindCover, proof('p2', 'filter-packed', { needs: ['cover-off'] })] }))).toEqual([])
    expect(saysOf(vary(soundSketch, { nodes: [behindCover, proof('p2', 'filter-packed', { closed: ['cover-off'] })] }))).toEqual([])
  })
  test('looks back over steps', () => {
    expect(saysOf(vary(soundSketch, { nodes: [behindCover, step('w')], drop: ['n2.bad > p2'], edges: ['n2.bad > w', 'w > p2'] }))).toEqual([
      'proof-without-access p2',
    ])
  })
  test('is no matter where the check before it needs nothing', () => {
    expect(
      saysOf({
        nodes: [
          start(),
          check('n1', ['yes', 'no'], {
            reproduces: true,
            outcomes: [
              { id: 'yes', title: 'Yes', reproduced: true },
              { id: 'no', title: 'No' },
            ],
          }),
          proof('p', 'worn'),
          cause('c', 'worn'),
          ask(),
        ],
        edges: ['s > n1', 'n1.yes > p', 'n1.no > ask', 'p.gone > c', 'p.still > ask'],
      }),
    ).toEqual([])
  })
})
