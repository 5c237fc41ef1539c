import { describe, expect, test } from 'vitest'

import { ask, buildChart, cause, check, proof, reading, start } from '#tests/support/chart-builder.ts'
import { access, backTo, noticed, started, storiesOn, tap, raw } from '#tests/support/walk-builder.ts'
import { toFilter } from '#tests/support/saw-stories.ts'
import { jumpingChart, otherChart, sawChart, sealChart } from '#tests/support/walk-charts.ts'

const { given } = storiesOn(sawChart)
const jumps = storiesOn(jumpingChart, sealChart, otherChart)

describe('noticed out of turn', () => {
  const chart = buildChart({
    id: 'saw',
    access: [
      { id: 'top-off', title: 'Top off', minutes: 1 },
      { id: 'warm', title: 'Warm', minutes: 3, excludes: ['top-off'] },
    ],
    nodes: [
      start(),
      check('n1', ['good', 'bad']),
      check('n2', ['good', 'bad'], { needs: ['top-off'] }),
      check('n3', ['good', 'bad'], { machine: 'running' }),
      check('n4', ['good', 'bad'], { closed: ['top-off'] }),
      check('n5', ['good', 'bad'], { onlyFor: { classes: ['mower'], otherwise: 'n6' } }),
      check('n6', ['good', 'bad'], { defeats: ['brake'], restores: ['brake'] }),
      check('n7', ['good', 'bad'], { needsOneOf: [['top-off'], ['warm']] }),
      reading('n8', { repeat: { equal: 2, within: 50, atMost: 5 } }),
      proof('p9', 'filter-packed'),
      cause('c9', 'filter-packed'),
      ask(),
    ],
    edges: [
      's > n1',
      'n1.good > n2',
      'n1.bad > ask',
      'n2.good > n3',
      'n2.bad > ask',
      'n3.good > n4',
      'n3.bad > ask',
      'n4.good > n5',
      'n4.bad > ask',
      'n5.good > n6',
      'n5.bad > ask',
      'n6.good > n7',
      'n6.bad > ask',
      'n7.good > n8',
      'n7.bad > p9',
      'n8.low > ask',
      'n8.in > ask',
      'p9.gone > c9',
      'p9.still > ask',
    ],
  })
  const saw = storiesOn(chart)
  const opened = [started(), access(['top-off'])]

  test('what its check needs has to be open, in one way or another, and nothing in the way', () => {
    saw.given(started()).when(noticed('n2', 'bad')).thenRefused('access-not-open')
    saw
      .given(...opened)
      .when(noticed('n2', 'bad'))
      .thenAt('n1')
    saw.given(started()).when(noticed('n7', 'bad')).thenRefused('access-not-open')
    saw
      .given(...opened)
      .when(noticed('n7', 'bad'))
      .thenAt('n1')
    saw.given(started()).when(noticed('n4', 'bad')).thenAt('n1')
    saw
      .given(...opened)
      .when(noticed('n4', 'bad'))
      .thenRefused('access-in-the-way')
  })

  test('the engine has to be as the check wants it', () => saw.given(started()).when(noticed('n3', 'bad')).thenRefused('wrong-machine-state'))

  test('the node where the walk stands is recorded as its finding, and proofs only in turn', () => {
    saw.given(started()).when(noticed('n1', 'bad')).thenRefused('stands-here')
    saw.given(started()).when(noticed('p9', 'gone')).thenRefused('only-in-turn')
    saw.given(started()).when(noticed('n6', 'bad')).thenRefused('only-in-turn')
    saw.given(started()).when(noticed('ask', 'bad')).thenRefused('not-a-check')
    saw.given(started()).when(noticed('n99', 'bad')).thenRefused('no-such-node')
    saw.given(started()).when(noticed('n5', 'bad')).thenRefused('not-for-this-machine')
  })

  test('what has its finding is not noticed, until a step back has spent it', () => {
    saw
      .given(...opened, tap('good'))
      .when(noticed('n1', 'bad'))
      .thenRefused('already-found')
    saw
      .given(...opened, tap('good'), tap('good'), backTo('n1'))
      .when(noticed('n2', 'bad'))
      .thenAt('n1')
  })

  test('it has an outcome of the check, or a value that tells one', () => {
    saw
      .given(...opened)
      .when(noticed('n2', 'odd'))
      .thenRefused('no-such-outcome')
    saw
      .given(...opened)
      .when(raw('noticed', { node: 'saw/n2', photoIds: [] }))
      .thenRefused('no-such-outcome')
    saw
      .given(...opened)
      .when(raw('noticed', { node: 'saw/n8', photoIds: [] }))
      .thenRefused('value-missing')
    saw
      .given(...opened)
      .when(raw('noticed', { node: 'saw/n8', value: 9000, unit: '1/min', photoIds: [] }))
      .thenRefused('only-in-turn')
    given(...toFilter)
      .when(raw('noticed', { node: 'saw/n2', value: 9000, photoIds: [] }))
      .thenRefused('already-found')
  })

  test('only checks of the charts that the walk is in', () => {
    jumps.given(started(), tap('yes')).when(noticed('seal/k1', 'tight')).thenRefused('not-on-stack')
    jumps.given(started(), tap('yes'), tap('seal')).when(noticed('n3', 'good')).thenAt('seal/k1')
    jumps.given(started(), tap('yes'), tap('away')).when(noticed('n3', 'good')).thenRefused('not-on-stack')
  })
})

describe('access out of turn', () => {
  test('each opening has its needs open, and nothing open that it excludes', () => {
    given(started())
      .when(access(['lead-off', 'cover-off']))
      .thenAt('n1')
      .then((walk) => expect(walk.minutesUsed).toBe(5))
    given(started())
      .when(access(['cover-off']))
      .thenRefused('needs-not-open', '/payload/opened/0')
    given(started())
      .when(access(['cover-off', 'lead-off']))
      .thenRefused('needs-not-open')
    given(started(), access(['lead-off']))
      .when(access(['warm']))
      .thenRefused('excluded-open')
    given(started(), access(['lead-off']))
      .when(access(['warm'], ['lead-off']))
      .thenAt('n1')
  })

  test('what is open is not opened, what is shut is not closed, what nobody knows is neither', () => {
    given(started(), access(['lead-off']))
      .when(access(['lead-off']))
      .thenRefused('already-open')
    given(started())
      .when(access(['lead-off', 'lead-off']))
      .thenRefused('already-open', '/payload/opened/1')
    given(started())
      .when(access([], ['lead-off']))
      .thenRefused('not-open', '/payload/closed/0')
    given(started())
      .when(access(['nobody-knows-it']))
      .thenRefused('no-such-access')
    given(started()).when(access([])).thenRefused('nothing-to-change')
  })
})
