import { describe, expect, test } from 'vitest'

import {
  act,
  closedAs,
  proven,
  repaired,
  runFailed,
  runItems,
  runPassed,
  skipped,
  started,
  storiesOn,
  tap,
  uuid,
  raw,
} from '#tests/support/walk-builder.ts'
import { toReading, toFilter, toCause, toProven, toRepaired, toUnsafe } from '#tests/support/saw-stories.ts'
import { sawChart } from '#tests/support/walk-charts.ts'

const { given } = storiesOn(sawChart)

describe('suspects, causes and proofs', () => {
  const sight = { note: 'Seen once more', photoIds: [] }

  test('a suspect is named where a proof of it is in reach', () => {
    given(...toReading)
      .when(raw('suspect-named', { causeId: 'drum-worn' }))
      .thenAt('p4')
    given(...toReading)
      .when(raw('suspect-named', { causeId: 'never-cleaned' }))
      .thenRefused('no-proof-in-reach')
    given(...toFilter, tap('good'))
      .when(raw('suspect-named', { causeId: 'filter-packed' }))
      .thenRefused('no-proof-in-reach')
    given(...toRepaired, runFailed)
      .when(raw('suspect-named', { causeId: 'filter-packed' }))
      .thenRefused('already-ruled-out')
    given(...toCause)
      .when(raw('suspect-named', { causeId: 'drum-worn' }))
      .thenRefused('wrong-phase')
  })

  test('a cause is proven where the walk stands, by its proof or by a second look: one of the two', () => {
    const prove = (more: object) =>
      given(...toCause).when((bench) =>
        raw('cause-proven', {
          causeId: 'filter-packed',
          ...more,
          ...('proof' in more ? { proof: undefined, proofEventId: bench.eventAt(String(more.proof)) } : {}),
        })(bench),
      )
    given(...toCause)
      .when(proven)
      .thenPhase('proven')
    given(...toCause)
      .when(raw('cause-proven', { causeId: 'filter-packed', sight }))
      .thenPhase('proven')
    given(...toCause)
      .when(raw('cause-proven', { causeId: 'drum-worn', sight }))
      .thenRefused('not-that-cause')
    given(...toCause)
      .when(raw('cause-proven', { causeId: 'filter-packed' }))
      .thenRefused('proof-or-sight')
    given(...toCause)
      .when(raw('cause-proven', { causeId: 'filter-packed', sight, proofEventId: uuid(1005) }))
      .thenRefused('proof-or-sight')
    given(...toCause)
      .when(raw('cause-proven', { causeId: 'filter-packed', sight: { note: ' ', photoIds: [] } }))
      .thenRefused('malformed', '/payload/sight/note')
    prove({ proofEventId: uuid(77) }).thenRefused('not-a-proof')
    prove({ proofEventId: uuid(1002) }).thenRefused('not-a-proof')
    given(...toReading)
      .when(raw('cause-proven', { causeId: 'filter-packed', sight }))
      .thenRefused('wrong-phase')
  })

  test('a cause may turn out not to be it, where the walk stands', () => {
    given(...toCause)
      .when(raw('cause-not-proven', { causeId: 'filter-packed', sight }))
      .thenAt('p3')
    given(...toCause)
      .when(raw('cause-not-proven', { causeId: 'drum-worn', sight }))
      .thenRefused('not-that-cause')
    given(...toCause)
      .when(raw('cause-not-proven', { causeId: 'filter-packed' }))
      .thenRefused('proof-or-sight')
  })

  test('what led to it, and work for the way out, are things that the charts know', () => {
    given(...toProven)
      .when(raw('contributing-set', { causeIds: ['never-cleaned'] }))
      .thenPhase('proven')
    given(...toProven)
      .when(raw('contributing-set', { causeIds: ['moon-phase'] }))
      .thenRefused('no-such-cause')
    given(...toProven)
      .when(raw('service-changed', { added: ['grease'], dropped: [] }))
      .thenPhase('proven')
    given(...toProven)
      .when(raw('service-changed', { added: ['polish'], dropped: [] }))
      .thenRefused('no-such-service-item', '/payload/added')
    given(...toProven)
      .when(raw('service-changed', { added: [], dropped: ['grease'] }))
      .thenRefused('no-such-service-item', '/payload/dropped')
  })
})

describe('repair, ticks and run', () => {
  test('repaired is what was proven, and of the service list what was on it', () => {
    given(...toCause)
      .when(repaired)
      .thenRefused('wrong-phase')
    given(...toProven)
      .when(raw('repair-done', { serviceDone: ['grease'], partsUsed: [], minutes: 5 }))
      .thenRefused('no-such-service-item')
    given(...toProven)
      .when(repaired)
      .thenPhase('repaired')
  })

  test('an item is ticked on a list that is open', () => {
    const tick = (list: string, id: string) => raw('ticked', { list, id, on: true })
    given(...toProven)
      .when(tick('fix', 'remedy'))
      .thenPhase('proven')
    given(...toProven)
      .when(tick('fix', 'part-9'))
      .thenRefused('no-such-item')
    given(...toProven)
      .when(tick('service', 'grease'))
      .thenRefused('no-such-item')
    given(...toProven)
      .when(tick('run', 'full-speed'))
      .thenRefused('list-closed')
    given(...toRepaired)
      .when(tick('run', 'full-speed'))
      .thenPhase('repaired')
    given(...toRepaired)
      .when(tick('run', 'seal-dry'))
      .thenRefused('no-such-item')
    given(...toRepaired)
      .when(tick('fix', 'remedy'))
      .thenRefused('list-closed')
    given(started()).when(tick('service', 'grease')).thenRefused('list-closed')
  })

  const passed = (items: object) => raw('run-passed', { items })
  test('a run is passed when every item of the machine is done, in order or not for this machine', () => {
    given(...toRepaired)
      .when(runPassed)
      .thenPhase('run-passed')
    given(...toRepaired)
      .when(passed(runItems('not-applicable')))
      .thenPhase('run-passed')
    given(...toRepaired)
      .when(passed(runItems('ok').slice(1)))
      .thenRefused('run-incomplete')
    given(...toRepaired)
      .when(passed([...runItems('ok'), ...runItems('ok').slice(0, 1)]))
      .thenRefused('no-such-item')
    given(...toRepaired)
      .when(passed([...runItems('ok').slice(1), ...runItems('failed').slice(0, 1)]))
      .thenRefused('run-not-ok')
    given(...toProven)
      .when(runPassed)
      .thenRefused('wrong-phase')
  })

  test('a value of the run has its unit, and out of limits it is not in order', () => {
    const limits = { fullSpeed: { min: 11_000, max: 13_500, unit: '1/min' } }
    const toRun = [started({ limits: limits as never }), ...toRepaired.slice(1)]
    const withSpeed = (more: object) => passed(runItems('ok').map((item) => (item.id === 'full-speed' ? { ...item, ...more } : item)))
    given(...toRun)
      .when(withSpeed({ value: 12_400, unit: '1/min' }))
      .thenPhase('run-passed')
    given(...toRun)
      .when(withSpeed({ value: 9850, unit: '1/min' }))
      .thenRefused('run-out-of-limits')
    given(...toRun)
      .when(withSpeed({ value: 12_400 }))
      .thenRefused('unit-missing')
  })

  test('a run is failed by an item that failed', () => {
    given(...toRepaired)
      .when(runFailed)
      .thenAt('p3')
    given(...toRepaired)
      .when(raw('run-failed', { items: runItems('ok') }))
      .thenRefused('nothing-failed')
    given(...toRepaired)
      .when(raw('run-failed', { items: [{ id: 'seal-dry', result: 'failed' }] }))
      .thenRefused('no-such-item')
  })
})

describe('how a walk ends', () => {
  test('a result fits where the walk stands', () => {
    given(...toRepaired, runPassed)
      .when(closedAs('repaired'))
      .thenPhase('closed')
    given(...toRepaired, runPassed)
      .when(closedAs('not-repaired'))
      .thenRefused('wrong-result')
    given(...toRepaired)
      .when(closedAs('repaired'))
      .thenRefused('wrong-phase')
    given(...toProven)
      .when(closedAs('not-repaired'))
      .thenPhase('closed')
    given(...toProven)
      .when(closedAs('referred'))
      .thenPhase('closed')
    given(...toProven)
      .when(closedAs('repaired'))
      .thenRefused('wrong-result')
    given(...toCause)
      .when(closedAs('not-repaired'))
      .thenRefused('wrong-phase')
    given(started()).when(closedAs('no-cause-found')).thenRefused('wrong-phase')
    given(started(), act('escalated', { reason: 'Odd' }))
      .when(closedAs('no-cause-found'))
      .thenPhase('closed')
    given(started(), skipped('n1', 'not-reproduced')).when(closedAs('not-reproduced')).thenPhase('closed')
    given(started(), act('held', { tagNo: '1', why: 'Leaks' }))
      .when(closedAs('held'))
      .thenPhase('closed')
    given(started(), act('held', { tagNo: '1', why: 'Leaks' }))
      .when(closedAs('referred'))
      .thenRefused('wrong-result')
  })

  test('an unsafe cause that is not repaired can only be held', () => {
    given(...toUnsafe).thenPage('proven', (page) => expect([page.cause.isUnsafe, page.canCloseUnrepaired]).toEqual([true, false]))
    given(...toUnsafe)
      .when(closedAs('not-repaired'))
      .thenRefused('unsafe-hold-only')
    given(...toUnsafe)
      .when(act('abandoned', { why: 'Owner in a hurry' }))
      .thenRefused('unsafe-hold-only')
    given(...toUnsafe, repaired)
      .when(act('abandoned', { why: 'Owner in a hurry' }))
      .thenRefused('unsafe-hold-only')
    given(...toUnsafe)
      .when(act('held', { tagNo: '17', why: 'Owner said no' }))
      .thenPhase('held')
    given(...toUnsafe, repaired, runPassed)
      .when(closedAs('repaired'))
      .thenPhase('closed')
  })

  test('a walk can be given up or held wherever it is open', () => {
    for (const story of [[started()], toCause, toProven, toRepaired]) {
      given(...story)
        .when(act('abandoned', { why: 'Scrapped' }))
        .thenPhase('abandoned')
      given(...story)
        .when(act('held', { tagNo: '1', why: 'Leaks' }))
        .thenPhase('held')
    }
    given(started(), act('held', { tagNo: '1', why: 'Leaks' }))
      .when(act('held', { tagNo: '2', why: 'Again' }))
      .thenRefused('wrong-phase')
    given(started())
      .when(act('held', { tagNo: ' ', why: 'Leaks' }))
      .thenRefused('malformed', '/payload/tagNo')
  })

  test('the lead is asked from the route alone', () => {
    given(started())
      .when(act('escalated', { reason: 'Never seen this' }))
      .thenPhase('escalated')
    given(...toCause)
      .when(act('escalated', { reason: 'Never seen this' }))
      .thenPhase('escalated')
    given(...toProven)
      .when(act('escalated', { reason: 'Never seen this' }))
      .thenRefused('wrong-phase')
  })
})
