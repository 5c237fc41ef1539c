import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { buildChart, sketchJson, soundSketch } from '#tests/support/chart-builder.ts'
import { migrate } from './migrations/steps.ts'
import { mostErrors, parseChart, parseChartText } from './parse.ts'

const sound = () => sketchJson(soundSketch)

function refusal(json: unknown) {
  const parsed = parseChart(json)
  if (parsed.ok) throw new Error('The door let this in.')
  return parsed.error
}

describe('the door for charts', () => {
  test('lets a chart in and takes nothing away from it', () => {
    expect(parseChart(sound())).toEqual({ ok: true, value: sound() })
  })

  test.each([null, 7, 'chart', [], {}, { format: 'drawing' }])('says that %j is not a chart', (json) => {
    expect(refusal(json).code).toBe('not-a-chart')
  })

  test('refuses a newer format in words instead of guessing', () => {
    const { code, detail } = refusal({ ...sound(), formatVersion: 2 })
    expect(code).toBe('too-new')
    expect(detail).toContain('format version 2')
  })

  test.each([undefined, 0, 1.5, '1'])('refuses format version %j and names the field', (formatVersion) => {
    expect(refusal({ ...sound(), formatVersion })).toMatchObject({ code: 'invalid', errors: [{ pointer: '#/formatVersion' }] })
  })

  test('names the node, the field and what may stand there', () => {
    const json = sketchJson({ nodes: [{ id: 'n1', kind: 'check', minutes: 'four', outcomes: [{ id: 'a', title: 7 }] }], edges: [] })
    expect(refusal(json).errors).toEqual([
      { pointer: '#/nodes/0/minutes', detail: 'Node n1: "minutes" must be a number.' },
      { pointer: '#/nodes/0/outcomes/0/title', detail: 'Node n1: outcome a: "title" must be text.' },
    ])
  })

  test('names an unknown kind, a missing field and a field that does not belong', () => {
    const json = sketchJson({ nodes: [{ id: 'n1', kind: 'riddle' }, { kind: 'start' }, { id: 's', kind: 'start', colour: 'red' }], edges: [] })
    expect(refusal(json).errors).toEqual([
      { pointer: '#/nodes/0/kind', detail: 'Node n1: "kind" is no kind of node: "riddle".' },
      { pointer: '#/nodes/1/id', detail: 'Node 2: "id" is missing.' },
      { pointer: '#/nodes/2/colour', detail: 'Node s: "colour" is not a field here.' },
    ])
  })

  test('escapes odd names in pointers (RFC 6901, section 3)', () => {
    expect(refusal({ ...sound(), 'a/b~c': 1 }).errors[0]?.pointer).toBe('#/a~1b~0c')
  })

  test('lists a bounded number of faults and says how many more there are', () => {
    const nodes = Array.from({ length: 500 }, (_, index) => ({ id: `n${index}`, kind: 'riddle' }))
    const { errors, detail } = refusal({ ...sound(), nodes })
    expect(errors).toHaveLength(mostErrors)
    expect(detail).toContain('499 more')
  })

  test.each(['__proto__', 'constructor', 'prototype', 'toString'])('the key %s reaches no object', (key) => {
    const text = JSON.stringify(sound()).replace('{', `{"${key}":{"polluted":true},`)
    expect(parseChartText(text)).toMatchObject({ ok: false, error: { code: 'invalid' } })
    const rows = JSON.parse(`{"${key}":{"good":"even"}}`) as unknown
    const inside = parseChart({ ...sound(), nodes: [{ id: 'n1', kind: 'check', rows, outcomes: [] }] })
    if (inside.ok) expect(JSON.stringify(inside.value.nodes)).not.toContain(key)
    expect(({} as Record<string, unknown>)['polluted']).toBeUndefined()
  })

  test('an id may not be a name that every object answers to', () => {
    expect(refusal({ ...sound(), nodes: [{ id: 'constructor', kind: 'start' }] }).code).toBe('invalid')
  })
})

describe('the text of a file', () => {
  test('a byte order mark is no fault', () => {
    expect(parseChartText(`\uFEFF${JSON.stringify(sound())}`).ok).toBe(true)
  })

  test.each([
    ['', 'This file is empty.'],
    ['{\n"format": "pullcord-chart",\n}', 'line 3'],
    ['{\n"format":', 'line 2'],
    [`{\n"format": "pullcord-chart",\n"nodes": [\n${' '.repeat(30)}x${' '.repeat(30)}]}`, 'line 4'],
    ['PK\u0003\u0004', 'line 1'],
    ['['.repeat(100_000), 'line 1'],
  ])('what is not JSON is refused with the place where it goes wrong', (text, words) => {
    const parsed = parseChartText(text)
    expect(parsed).toMatchObject({ ok: false, error: { code: 'not-a-chart' } })
    if (!parsed.ok) expect(parsed.error.detail).toContain(words)
  })
})

describe('migrations', () => {
  const steps = [(old: object) => ({ ...old, first: true }), (old: object) => ({ ...old, second: 'first' in old })]

  test('an old document takes every step that lies ahead of it, in order', () => {
    expect(migrate({ formatVersion: 1 }, 1, steps)).toEqual({ formatVersion: 3, first: true, second: true })
    expect(migrate({ formatVersion: 2 }, 2, steps)).toEqual({ formatVersion: 3, second: false })
  })

  test('a current document is left as it is', () => {
    expect(migrate({ formatVersion: 3, odd: 1 }, 3, steps)).toEqual({ formatVersion: 3, odd: 1 })
  })
})

test('whatever comes in, the door answers and never throws', () => {
  const garbage = fc.oneof(
    fc.jsonValue(),
    fc.jsonValue().map((part) => ({ ...sound(), nodes: part })),
    fc.jsonValue().map((part) => ({ ...sound(), library: part, edges: [part] })),
    fc
      .record({ id: fc.jsonValue(), kind: fc.constantFrom('check', 'reading', 'proof', 'jump'), outcomes: fc.jsonValue(), limits: fc.jsonValue() })
      .map((node) => ({ ...sound(), nodes: [node] })),
    fc.dictionary(fc.string(), fc.jsonValue()).map((part) => ({ ...sound(), ...part })),
  )
  fc.assert(
    fc.property(garbage, (json) => {
      const parsed = parseChart(json)
      if (!parsed.ok) expect(parsed.error.errors.length).toBeGreaterThan(0)
    }),
  )
  fc.assert(fc.property(fc.string(), (text) => typeof parseChartText(text).ok === 'boolean'))
})

test('what the door let in, it lets in again', () => {
  const chart = buildChart(soundSketch)
  expect(parseChart(JSON.parse(JSON.stringify(chart)))).toEqual({ ok: true, value: chart })
})
