import { describe, expect, test } from 'vitest'
import { ask, check, jump, proof, soundSketch, start, type ChartSketch } from '#tests/support/chart-builder.ts'
import { saysOf, vary } from '#tests/support/lint.ts'

const cover = { id: 'cover-off', title: 'Cover off', minutes: 2 }
const lead = { id: 'lead-off', title: 'Lead off', minutes: 1 }

/** The sound chart whose check and proof need something. */
const needing = (more: Record<string, unknown>, access: readonly Record<string, unknown>[]): ChartSketch =>
  vary(soundSketch, { nodes: [check('n2', undefined, more), proof('p2', 'filter-packed', more)], more: { access } })

describe('access', () => {
  test('a ring of needs is an error, an access that needs itself too', () => {
    const more = { needs: ['cover-off'] }
    expect(
      saysOf(
        needing(more, [
          { ...cover, needs: ['lead-off'] },
          { ...lead, needs: ['cover-off'] },
        ]),
      ),
    ).toEqual(['access-ring'])
    expect(saysOf(needing(more, [{ ...cover, needs: ['cover-off'] }]))).toEqual(['access-ring'])
    expect(saysOf(needing(more, [{ ...cover, needs: ['lead-off'] }, lead]))).toEqual([])
  })

  test('two needs that exclude each other are an error; where one alone excludes the other, it is opened last', () => {
    const more = { needs: ['plug-out', 'warm'] }
    const plug = { id: 'plug-out', title: 'Plug out', minutes: 2 }
    const warm = { id: 'warm', title: 'Warm', minutes: 3, excludes: ['plug-out'] }
    expect(saysOf(needing(more, [plug, warm]))).toEqual([])
    expect(saysOf(needing(more, [{ ...plug, excludes: ['warm'] }, warm]))).toEqual(['needs-clash n2', 'needs-clash p2'])
  })

  test('a need that stands among what is wanted closed is an error, in an alternative too', () => {
    expect(saysOf(needing({ needs: ['cover-off'], closed: ['cover-off'] }, [cover]))).toEqual(['needs-clash n2', 'needs-clash p2'])
    expect(saysOf(needing({ needsOneOf: [['cover-off'], ['lead-off']], closed: ['lead-off'] }, [cover, lead]))).toEqual(['needs-clash n2', 'needs-clash p2'])
    expect(saysOf(needing({ needsOneOf: [['cover-off'], ['lead-off']] }, [cover, lead]))).toEqual([])
  })

  test('two alternatives may exclude each other, since only one of them is opened', () => {
    const access = [
      { ...cover, excludes: ['lead-off'] },
      { ...lead, excludes: ['cover-off'] },
    ]
    expect(saysOf(needing({ needsOneOf: [['cover-off'], ['lead-off']] }, access))).toEqual([])
  })

  test('an access that no node needs is worth a look, unless another access needs it', () => {
    expect(saysOf({ ...soundSketch, access: [cover] })).toEqual(['unused-access'])
    expect(saysOf(needing({ needs: ['cover-off'] }, [{ ...cover, needs: ['lead-off'] }, lead]))).toEqual([])
  })

  test('an access that a joined chart defines otherwise is worth a look; what is left out counts as nothing', () => {
    const here = vary(needing({ needs: ['cover-off'] }, [cover]), { nodes: [jump('j', 'other')], drop: ['n2.good > ask'], edges: ['n2.good > j'] })
    const other = (access: Record<string, unknown>): ChartSketch => ({
      id: 'other',
      nodes: [start(), check('k', undefined, { needs: ['cover-off'] }), ask()],
      edges: ['s > k', 'k.good > ask', 'k.bad > ask'],
      access: [access],
    })
    expect(saysOf(here, [other({ ...cover, minutes: 4 })])).toEqual(['access-defined-otherwise'])
    expect(saysOf(here, [other({ ...cover, closeMinutes: 0, needs: [], excludes: [] })])).toEqual([])
  })
})
