import { describe, expect, test } from 'vitest'

import type { OutcomeId } from '#shared/lib/ids.ts'
import { ask, buildChart, cause, check, jump, proof, reading, start, step } from '#tests/support/chart-builder.ts'
import {
  access,
  act,
  answer,
  asked,
  backTo as stepBackTo,
  by,
  found,
  notProven,
  proven,
  questionId,
  repaired,
  revs,
  runPassed,
  skipped,
  started,
  storiesOn,
  tap,
  type Act,
} from '#tests/support/walk-builder.ts'
import { toReading, toFilter, toCause } from '#tests/support/saw-stories.ts'
import { jumpingChart, otherChart, sawChart, sealChart } from '#tests/support/walk-charts.ts'
import { checksLeft, type ChecksLeft } from './checks-left.ts'
import { heldAgainst, judgeTries, wasSoBefore } from './judging.ts'
import { backTo, knots, openAccess, passedOver, questionWords } from './select.ts'
import { isOpen } from './state.ts'

const { given } = storiesOn(sawChart)
const jumps = storiesOn(jumpingChart, sealChart, otherChart)

describe('the page of a check', () => {
  test('shows its number, its words, its outcomes with balloons, and what recording it opens', () => {
    given(...toFilter, tap('good')).thenPage('check', (page) => {
      expect(page.node).toMatchObject({ place: 'saw/n4', number: '4', title: 'Look at n4', chartTitle: 'No guts', minutes: 1 })
      expect(page.outcomes.map(({ balloon, title, isNormal }) => [balloon, title, isNormal])).toEqual([
        [1, 'Good', true],
        [2, 'Stripe', false],
      ])
      expect(page.entering).toMatchObject({
        minutes: 5,
        machine: 'stopped',
        opens: [
          { accessId: 'lead-off', title: 'Lead off', minutes: 1 },
          { accessId: 'cover-off', minutes: 4 },
        ],
        closes: [],
      })
      expect(page.noAnswer).toEqual({ ifSkipped: { outcome: 'good', title: 'Good' }, endsWalk: false })
    })
  })

  test('what entering closes is told with its title', () => {
    given(started(), access(['lead-off'])).thenPage('check', (page) => expect(page.entering.closes).toEqual([{ accessId: 'lead-off', title: 'Lead off' }]))
  })

  test('says that it reproduces, and which outcome puts work on the service list', () => {
    given(started()).thenPage('check', (page) => expect([page.outcomes[0]?.isReproduced, page.noAnswer]).toEqual([true, { ifSkipped: null, endsWalk: true }]))
    given(...toFilter).thenPage('check', (page) => expect(page.outcomes[1]).toMatchObject({ isServiceable: true, serviceItem: 'Clean the filter' }))
  })

  test('from the tenth outcome on there is no balloon', () => {
    const many = buildChart({
      id: 'saw',
      nodes: [
        start(),
        check(
          'n1',
          Array.from({ length: 10 }, (_, index) => `o${index}`),
        ),
        ask(),
      ],
      edges: ['s > n1'],
    })
    storiesOn(many)
      .given(started())
      .thenPage('check', (page) => expect(page.outcomes.map(({ balloon }) => balloon)).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, null]))
  })

  test('access of the steps on the page is told with that of the check', () => {
    given(...toReading, revs(12_000), tap('stripe')).thenPage('proof', (page) => {
      expect(page.lines.map(({ place }) => place)).toEqual(['saw/x4'])
      expect(page.needsNote).toBe(true)
    })
  })
})

describe('the page of a reading', () => {
  test('carries its limits, its bands and its buttons', () => {
    given(...toReading).thenPage('reading', (page) => {
      expect(page.judging).toMatchObject({ limits: { min: 11_000, unit: '1/min' }, repeat: null, proof: null })
      expect(page.outcomes.map(({ title, isBanded }) => [title, isBanded])).toEqual([
        ['Low', true],
        ['In limits', true],
        ['Never settles', false],
      ])
    })
  })
})

describe('the page of a proof', () => {
  test('sets the reading before the change beside what is to be measured, and says what proves it', () => {
    given(...toFilter, tap('dark')).thenPage('proof', (page) => {
      expect(page).toMatchObject({
        by: 'isolation',
        suspect: { title: 'Filter packed', isUnsafe: false },
        before: { title: 'Low', answer: { value: 9850 } },
        compares: { place: 'saw/n2' },
      })
      expect(page.judging?.proof).toEqual({ confirmsWhen: ['in'], confirming: 'gone', refuting: 'still', before: 'low' })
    })
  })

  const before = buildChart({
    id: 'saw',
    access: [
      { id: 'warm', title: 'Warm', minutes: 3 },
      { id: 'chain-off', title: 'Chain off', minutes: 2, closeMinutes: 1 },
    ],
    nodes: [
      start(),
      check('n1', ['good', 'dark']),
      reading('n2', { needs: ['warm'], minutes: 1 }),
      proof('p1', 'band-drags', { needs: ['chain-off', 'warm'], compares: { node: 'n2', confirmsWhen: ['in'] } }),
      cause('c1', 'band-drags'),
      ask(),
    ],
    edges: ['s > n1', 'n1.good > n2', 'n1.dark > p1', 'n2.low > ask', 'n2.in > ask', 'p1.gone > c1', 'p1.still > n2'],
  })

  test('takes the reading first where there is none, each page with the access that is its own', () => {
    storiesOn(before)
      .given(started(), tap('dark'))
      .thenPage('before', (page) => {
        expect(page.node.place).toBe('saw/n2')
        expect(page.entering.opens.map(({ accessId }) => accessId)).toEqual(['warm'])
        expect(page.proof.entering.opens.map(({ accessId }) => accessId)).toEqual(['chain-off'])
        expect(page.judging?.proof).toBeNull()
        expect(page.proof.judging?.proof).not.toBeNull()
      })
  })

  test('whose reading was in limits before the change is judged by hand, as the page knows from the trail and learns from its first half', () => {
    const within = { outcome: 'in' as OutcomeId }
    storiesOn(before)
      .given(started(), tap('dark'))
      .thenPage('before', ({ proof: { judging } }) => {
        const verdict = (found: typeof within | null) => {
          const after = heldAgainst(judging, found)
          return after && judgeTries(after, [12_000], '1/min')
        }
        expect(verdict(null)).toEqual({ kind: 'outcome', outcome: 'gone' })
        expect(verdict(within)).toEqual({ kind: 'was-so-before' })
        expect(verdict({ outcome: 'low' as OutcomeId })).toEqual({ kind: 'outcome', outcome: 'gone' })
      })
    const found = buildChart({
      id: 'saw',
      nodes: [start(), reading('n2'), proof('p1', 'filter-packed', { compares: { node: 'n2', confirmsWhen: ['in'] } }), cause('c1', 'filter-packed'), ask()],
      edges: ['s > n2', 'n2.in > p1', 'n2.low > p1', 'p1.gone > c1', 'p1.still > ask'],
    })
    storiesOn(found)
      .given(started(), revs(12_000))
      .thenPage('proof', ({ judging }) => expect(judging && wasSoBefore(judging)).toBe(true))
    storiesOn(found)
      .given(started(), revs(9000))
      .thenPage('proof', ({ judging }) => expect(judging && wasSoBefore(judging)).toBe(false))
  })

  test('that was answered before a step back can be recorded again with all that was taken for it', () => {
    const proved = answer({ values: [12_100], unit: '1/min', before: { values: [9000], unit: '1/min' } })
    storiesOn(before)
      .given(started(), tap('dark'), proved, stepBackTo('p1'))
      .thenPage('before', (page) => expect(page.proof.offered?.answer).toEqual({ outcome: 'gone', value: 12_100, unit: '1/min' }))
    storiesOn(before)
      .given(started(), tap('dark'), proved, stepBackTo('p1'))
      .when((bench) => found('p1', 'gone', { value: 12_100, unit: '1/min', judgedBy: 'limits', reuses: bench.eventAt('p1') })(bench))
      .thenAt('c1')
      .then((walk) => {
        expect(walk.trail.at(-1)).toMatchObject({ before: { outcome: 'low', value: 9000 }, minutes: 0 })
      })
  })
})

describe('the page of a cause', () => {
  test('names the finding that proves it, or asks for a second look', () => {
    given(...toCause).thenPage('cause', (page) => expect(page).toMatchObject({ cause: { title: 'Filter packed', system: 'air' }, proof: { place: 'saw/p3' } }))
    const bare = buildChart({
      id: 'saw',
      nodes: [start(), check('n1', ['good', 'bad']), cause('c1', 'band-drags'), ask()],
      edges: ['s > n1', 'n1.good > ask', 'n1.bad > c1'],
    })
    storiesOn(bare)
      .given(started(), tap('bad'))
      .thenPage('cause', (page) => expect([page.proofEventId, page.proof]).toEqual([null, null]))
  })

  test('once proven it shows the proof, the fix, and service items to choose from', () => {
    given(...toCause, proven).thenPage('proven', (page) => {
      expect(page).toMatchObject({ proof: { place: 'saw/p3' }, fix: { minutes: 5 }, canCloseUnrepaired: true, service: [] })
      expect(page.serviceChoices.map(({ title }) => title)).toEqual(['Clean the filter', 'Grease the tip'])
    })
  })

  test('the run lists the items of the machine, each with its limits where it has any', () => {
    const limits = { fullSpeed: { min: 11_000, unit: '1/min' } }
    given(started({ limits: limits as never }), ...toCause.slice(1), proven, repaired, act('ticked', { list: 'run', id: 'full-speed', on: true })).thenPage(
      'run',
      (page) => {
        expect(page.items.find(({ id }) => id === 'full-speed')).toMatchObject({ isTicked: true, limits: { min: 11_000 } })
        expect([page.items.length > 5, page.isComplete]).toEqual([true, false])
      },
    )
    given(...toCause, proven, repaired, runPassed).thenPage('run-passed', (page) => expect(page.run).toHaveLength(page.run.length))
  })
})

describe('the page of an escalation', () => {
  test('says why in words, what was skipped, what was ruled out, and what the lead was asked', () => {
    given(...toFilter, skipped('n3'), tap('good'), asked, act('escalated', { reason: 'Never seen this' })).thenPage('escalated', (page) => {
      expect(page).toMatchObject({
        reasonWords: 'Never seen this',
        at: { place: 'saw/n5' },
        skipped: [{ node: { place: 'saw/n3' } }],
        questions: [{ text: 'Is this a rub stripe?', answer: null }],
      })
      expect(page.results).toContain('no-cause-found')
    })
    given(started(), skipped('n1', 'not-reproduced')).thenPage('escalated', (page) => {
      expect(page.reasonWords).toMatch(/does not show/)
      expect(page.results[0]).toBe('not-reproduced')
    })
    const one = buildChart({
      id: 'saw',
      nodes: [start(), check('n1', ['a', 'b']), cause('c1', 'x'), cause('c2', 'x')],
      edges: ['s > n1', 'n1.a > c1', 'n1.b > c2'],
    })
    storiesOn(one)
      .given(started(), tap('a'), notProven)
      .thenPage('escalated', (page) => expect(page.ruledOut).toMatchObject([{ cause: { causeId: 'x' }, how: 'cause-not-proven' }]))
  })

  test('the answer of the lead stands with its question', () => {
    given(started(), asked, by('lead', act('answered', { questionId, text: 'Look at the drum', photoIds: [], goTo: 'saw/n4' as never }))).then(
      (walk, { charts }) => {
        expect(questionWords(charts, walk)).toMatchObject([{ answer: 'Look at the drum', goTo: { place: 'saw/n4' } }])
      },
    )
  })
})

describe('what the player shows beside the page', () => {
  test("what's off, in the order in which it was opened, with what it charged", () => {
    given(...toFilter, tap('good'), tap('good')).then((walk, { charts }) => {
      expect(openAccess(charts, walk)).toEqual([
        { accessId: 'warm', title: 'Warm', minutes: 3 },
        { accessId: 'top-off', title: 'Top cover off', minutes: 2 },
        { accessId: 'lead-off', title: 'Lead off', minutes: 1 },
        { accessId: 'cover-off', title: 'Clutch cover off', minutes: 4 },
      ])
    })
  })

  test('jumps that were passed over since their chart is not there yet', () => {
    jumps
      .given(started(), tap('yes'), tap('absent'))
      .then((walk, { charts }) => expect(passedOver(charts, walk)).toMatchObject([{ place: 'saw/j-absent', title: 'Go on in nobody-wrote-it' }]))
  })

  test('knots: the start, what was recorded and still counts, and where the walk stands', () => {
    given(...toFilter, tap('good'), stepBackTo('n3')).then((walk, { charts }) => {
      expect(knots(charts, walk).map(({ place, kind, isHere }) => [place, kind, isHere])).toEqual([
        ['saw/s', 'start', false],
        ['saw/n1', 'check', false],
        ['saw/n2', 'reading', false],
        ['saw/n3', 'check', true],
      ])
    })
  })

  test('back goes to the latest page that there was; steps go with the check on whose page they stood', () => {
    const target = (acts: Act[], from = given) => {
      let place: string | undefined
      from(...acts).then((walk, { charts }) => {
        const id = isOpen(walk) ? backTo(charts, walk) : null
        place = walk.trail.find(({ eventId }) => eventId === id)?.position.node
      })
      return place
    }
    expect(target([started()])).toBeUndefined()
    expect(target(toFilter)).toBe('saw/n2')
    expect(target([...toReading, revs(12_000), tap('stripe'), answer({ outcome: 'still' as never })])).toBe('saw/p4')
    expect(target([...toReading, revs(12_000), tap('stripe'), answer({ outcome: 'still' as never }), stepBackTo('p4')])).toBe('saw/n4')
    const alone = buildChart({
      id: 'saw',
      nodes: [start(), step('x1', { timer: { seconds: 5, rule: 'at-least' } }), check('n1'), ask()],
      edges: ['s > x1', 'x1 > n1', 'n1.good > ask', 'n1.bad > ask'],
    })
    expect(target([started(), act('step-done', { node: 'saw/x1' as never, seconds: 5 })], storiesOn(alone).given)).toBe('saw/x1')
    expect(target([...toCause, proven, repaired])).toBeUndefined()
  })
})

describe('checks left', () => {
  const left = (from: typeof given, ...acts: Act[]): ChecksLeft | null => {
    let seen: ChecksLeft | null = null
    from(...acts).then((walk, { charts }) => (seen = isOpen(walk) ? checksLeft(charts, walk) : null))
    return seen
  }

  test('the shortest and the longest way from here, this page included; steps are no checks', () => {
    expect(left(given, started())).toEqual({ shortest: 1, longest: 7, isAtLeast: false })
    expect(left(given, ...toReading, revs(12_000), tap('stripe'))).toEqual({ shortest: 1, longest: 2, isAtLeast: false })
    expect(left(given, ...toCause)).toEqual({ shortest: 0, longest: 0, isAtLeast: false })
  })

  test('a loop ahead makes it "at least"', () => {
    const loop = buildChart({
      id: 'saw',
      nodes: [start(), check('n1'), check('n2'), ask()],
      edges: ['s > n1', 'n1.good > n2', 'n1.bad > ask', 'n2.good > ask', 'n2.bad > n1'],
    })
    expect(left(storiesOn(loop).given, started())).toEqual({ shortest: 1, longest: 2, isAtLeast: true })
    const self = buildChart({ id: 'saw', nodes: [start(), check('n1')], edges: ['s > n1', 'n1.good > n1', 'n1.bad > n1'] })
    expect(left(storiesOn(self).given, started())).toEqual({ shortest: 1, longest: 1, isAtLeast: true })
  })

  test('a jump that does not come back does, too; one that comes back counts the checks of its chart', () => {
    expect(left(jumps.given, started(), tap('yes'))).toEqual({ shortest: 1, longest: 4, isAtLeast: true })
    expect(left(jumps.given, started(), tap('yes'), tap('seal'))).toEqual({ shortest: 2, longest: 3, isAtLeast: false })
    const away = buildChart({ id: 'saw', nodes: [start(), check('n1'), jump('j', 'other'), ask()], edges: ['s > n1', 'n1.good > j', 'n1.bad > ask'] })
    expect(left(storiesOn(away, otherChart).given, started())).toEqual({ shortest: 1, longest: 1, isAtLeast: true })
  })

  test('nodes for other machines are not counted', () => {
    const chart = buildChart({
      id: 'saw',
      nodes: [start(), check('n1'), check('n2', ['good', 'bad'], { onlyFor: { classes: ['mower'] } }), ask()],
      edges: ['s > n1', 'n1.good > n2', 'n1.bad > n2', 'n2.good > ask', 'n2.bad > ask'],
    })
    expect(left(storiesOn(chart).given, started())).toEqual({ shortest: 1, longest: 1, isAtLeast: false })
  })
})
