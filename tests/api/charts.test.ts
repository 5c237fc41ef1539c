import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import type { ChartDocument } from '#shared/chart/document.ts'
import { chartDraftRevisions, chartVersions } from '#server/db/schema/charts.ts'
import { walkEvents } from '#server/db/schema/walks.ts'
import { ask, buildChart, check, cause, jump, proof, reproducing, sketchJson, start } from '#tests/support/chart-builder.ts'
import { started } from '#tests/support/walk-builder.ts'
import { sawSketch } from '#tests/support/walk-charts.ts'
import { eq } from 'drizzle-orm'
import { logOf, openBench, publish, send } from './saw-walks.ts'
import { openTestShop, type Client, type TestShop } from './test-shop.ts'

let shop: TestShop
let junior: Client
let lead: Client
beforeAll(async () => {
  shop = await openTestShop()
  ;({ junior, lead } = await openBench(shop))
})
afterAll(() => shop.close())

/** A chart that can be published as it is. */
function sound(id: string, more: { title?: string; searchWords?: string[]; causeTitle?: string; jumps?: string } = {}): ChartDocument {
  return buildChart({
    id,
    title: more.title ?? `Chart ${id}`,
    causes: [{ id: 'filter-packed', title: more.causeTitle ?? 'Filter packed', system: 'air', remedy: { text: 'Clean the filter', minutes: 5 } }],
    nodes: [
      start('s', { title: more.title ?? `Start of ${id}` }),
      reproducing(),
      check('n2'),
      proof('p2', 'filter-packed'),
      cause('c2', 'filter-packed'),
      more.jumps === undefined ? ask() : jump('ask', more.jumps),
      ask('a0', { reason: 'could-not-reproduce' }),
    ],
    edges: ['s > n1', 'n1.yes > n2', 'n1.no > a0', 'n2.good > ask', 'n2.bad > p2', 'p2.gone > c2', 'p2.still > ask'],
    more: { searchWords: more.searchWords ?? [] },
  })
}

const make = async (document: ChartDocument) => {
  const answer = await lead.post('/api/charts', { document })
  expect(answer.status).toBe(201)
  return answer.headers.get('etag') ?? ''
}
const save = (document: ChartDocument, ifMatch: string | null) =>
  lead.put(`/api/charts/${document.id}/draft`, { document }, ifMatch === null ? {} : { 'if-match': ifMatch })
const retitled = (document: ChartDocument, title: string): ChartDocument => ({ ...document, title })

describe('a draft', () => {
  test('is saved over the state that its ETag names, and takes a new one', async () => {
    const document = sound('saved')
    expect(await make(document)).toBe('"r1"')
    const answer = await save(retitled(document, 'Other title'), '"r1"')
    expect([answer.status, answer.headers.get('etag'), answer.body['revision'], answer.body['savedBy']]).toEqual([200, '"r2"', 2, 'Lena Marsh'])
    expect((await lead.get('/api/charts/saved/draft')).body['document']).toEqual(retitled(document, 'Other title'))
  })

  test('without If-Match is 428, and nothing is saved', async () => {
    const document = sound('unmatched')
    await make(document)
    const answer = await save(retitled(document, 'Blind'), null)
    expect([answer.status, answer.body['code']]).toEqual([428, 'if-match-missing'])
    expect((await lead.get('/api/charts/unmatched/draft')).body['revision']).toBe(1)
  })

  test.each(['"r2"', 'W/"r1"', '*', 'r1', '"r1", "r2"', '"r99999999999"'])('over %s, which is not its state, is 412 with the state that is', async (tag) => {
    const document = sound(`moved-${tag.replace(/\W/g, '')}-${tag.length}`)
    await make(document)
    const answer = await save(retitled(document, 'Too late'), tag)
    expect([answer.status, answer.body['code']]).toEqual([412, 'draft-moved-on'])
    expect(answer.body['current']).toMatchObject({ revision: 1, savedBy: 'Lena Marsh', document })
  })

  test('sent again after a lost answer succeeds, and is saved once', async () => {
    const document = sound('retried')
    await make(document)
    const changed = retitled(document, 'Changed')
    const answers = [await save(changed, '"r1"'), await save(changed, '"r1"'), await save(changed, '"r1"')]
    expect(answers.map(({ status, headers }) => [status, headers.get('etag')])).toEqual([
      [200, '"r2"'],
      [200, '"r2"'],
      [200, '"r2"'],
    ])
  })

  test('saved by eight editors at once goes on from one of them, and the others are told', async () => {
    const document = sound('raced')
    await make(document)
    for (let round = 1; round <= 3; round++) {
      const answers = await Promise.all(Array.from({ length: 8 }, (_, editor) => save(retitled(document, `Round ${round}, editor ${editor}`), `"r${round}"`)))
      expect(answers.filter(({ status }) => status === 200)).toHaveLength(1)
      expect(answers.filter(({ status }) => status === 412)).toHaveLength(7)
      const winner = answers.find(({ status }) => status === 200)
      expect((await lead.get('/api/charts/raced/draft')).body['document']).toEqual(winner?.body['document'])
    }
  })

  test('keeps its last fifty states', async () => {
    const document = sound('kept')
    let tag = await make(document)
    for (let count = 0; count < 55; count++) tag = (await save(retitled(document, `State ${count}`), tag)).headers.get('etag') ?? ''
    const kept = await shop.deps.db
      .select({ revision: chartDraftRevisions.revision })
      .from(chartDraftRevisions)
      .where(eq(chartDraftRevisions.chartId, document.id))
    expect(kept.map(({ revision }) => revision).sort((one, other) => one - other)).toEqual(Array.from({ length: 50 }, (_, count) => count + 7))
  })

  test('keeps the id of its chart; a chart is made once', async () => {
    const document = sound('once')
    await make(document)
    const other = await lead.put('/api/charts/once/draft', { document: { ...document, id: 'twice' } }, { 'if-match': '"r1"' })
    expect([other.status, other.body['code'], other.body['errors']]).toMatchObject([422, 'invalid-chart', [{ pointer: '#/document/id' }]])
    const again = await lead.post('/api/charts', { document })
    expect([again.status, again.body['code']]).toEqual([409, 'chart-exists'])
    expect((await lead.get('/api/charts/twice/draft')).status).toBe(404)
  })

  test('is not shown to a junior: neither in the list nor by address', async () => {
    await make(sound('hidden'))
    const ids = async (client: Client) => ((await client.get('/api/charts')).body['charts'] as { id: string }[]).map(({ id }) => id)
    expect(await ids(lead)).toContain('hidden')
    expect(await ids(junior)).not.toContain('hidden')
    expect((await junior.get('/api/charts/hidden/draft')).status).toBe(403)
    expect((await junior.get('/api/charts/hidden/reach')).status).toBe(404)
  })
})

describe('what the chart door refuses', () => {
  test.each([
    ['no JSON object', 'a chart', 'not-a-chart', '#/document'],
    ['something else', { format: 'recipe' }, 'not-a-chart', '#/document/format'],
    ['a newer format', { ...sketchJson(sawSketch), formatVersion: 99 }, 'too-new', '#/document/formatVersion'],
    ['a missing field', { ...sketchJson(sawSketch), nodes: undefined }, 'invalid-chart', '#/document/nodes'],
    ['an unknown kind of node', { ...sketchJson(sawSketch), nodes: [{ id: 'a', kind: 'loop' }] }, 'invalid-chart', '#/document/nodes/0/kind'],
    ['a foreign field', { ...sketchJson(sawSketch), createdBy: 'me' }, 'invalid-chart', '#/document'],
  ])('%s, by name', async (_name, document, code, pointer) => {
    for (const answer of [await lead.post('/api/charts', { document }), await lead.post('/api/charts/check', { document })]) {
      expect([answer.status, answer.body['code']]).toEqual([422, code])
      expect((answer.body['errors'] as { pointer: string }[])[0]?.pointer.startsWith(pointer)).toBe(true)
    }
  })

  test('a chart of 5 MB', async () => {
    const document = { ...sketchJson(sawSketch), title: 'x'.repeat(5_000_000) }
    for (const answer of [
      await lead.post('/api/charts', { document }),
      await lead.post('/api/charts/check', { document }),
      await lead.put('/api/charts/saw/draft', { document }, { 'if-match': '"r1"' }),
    ]) {
      expect([answer.status, answer.body['code']]).toEqual([413, 'too-large'])
    }
  })

  test('keys that every object answers to: as a field they are refused, as an id too, and nothing else notices', async () => {
    const text = (field: string) => JSON.stringify({ document: sketchJson(sawSketch) }).replace('"title":"No guts"', `"title":"No guts",${field}`)
    for (const field of [
      '"__proto__":{"isAdmin":true}',
      '"constructor":{"prototype":{"isAdmin":true}}',
      '"positions":{"__proto__":{"x":1,"y":1},"constructor":{"x":1,"y":1}}',
    ]) {
      const answer = await lead.ask('POST', '/api/charts/check', { body: text(field) })
      expect(answer.status === 422 || answer.status === 200).toBe(true)
      expect(answer.status).toBeLessThan(500)
    }
    expect(({} as Record<string, unknown>)['isAdmin']).toBeUndefined()
    const named = await lead.post('/api/charts', { document: { ...sketchJson(sawSketch), id: 'constructor' } })
    expect(named.body['code']).toBe('invalid-chart')
  })

  test('bands that overlap or leave a gap, and a ring of returning jumps, are remarks of the check and no publishing', async () => {
    const banded = (bands: object[]) => ({
      ...sketchJson(sawSketch),
      id: 'banded',
      nodes: (sketchJson(sawSketch)['nodes'] as { id: string }[]).map((node) => (node.id === 'n2' ? { ...node, bands } : node)),
    })
    const overlap = await lead.post('/api/charts/check', {
      document: banded([
        { outcome: 'low', to: 10_000, toIncluded: true },
        { outcome: 'in', from: 9_000, fromIncluded: true },
      ]),
    })
    const gap = await lead.post('/api/charts/check', {
      document: banded([
        { outcome: 'low', to: 9_000 },
        { outcome: 'in', from: 10_000 },
      ]),
    })
    for (const { status, body } of [overlap, gap]) {
      expect(status).toBe(200)
      expect((body['remarks'] as { severity: string; node?: string }[]).some(({ severity, node }) => severity === 'error' && node === 'n2')).toBe(true)
    }
    const draft = await lead.post('/api/charts', {
      document: banded([
        { outcome: 'low', to: 9_000 },
        { outcome: 'in', from: 10_000 },
      ]),
    })
    const answer = await lead.post('/api/charts/banded/publish', { revision: draft.body['revision'], changeNote: 'x', acceptsWarnings: true })
    expect([answer.status, answer.body['code']]).toEqual([422, 'chart-has-errors'])
    expect((answer.body['remarks'] as unknown[]).length).toBeGreaterThan(0)
  })
})

describe('publishing', () => {
  test('gives the next number, asks for a word about warnings, and never twice the same', async () => {
    const document = sound('published', { jumps: 'not-there-yet' })
    await make(document)
    const ask_ = (more: object) => lead.post('/api/charts/published/publish', { revision: 1, changeNote: 'First', acceptsWarnings: false, ...more })
    const unseen = await ask_({})
    expect([unseen.status, unseen.body['code']]).toEqual([409, 'warnings-unseen'])
    expect((unseen.body['remarks'] as { code: string }[]).map(({ code }) => code)).toContain('jump-chart-missing')
    expect((await ask_({ changeNote: '  ' })).body['errors']).toEqual([{ pointer: '#/changeNote', detail: 'Say in a few words what changed.' }])
    expect((await ask_({ revision: 7, acceptsWarnings: true })).status).toBe(412)
    const answers = await Promise.all(Array.from({ length: 5 }, () => ask_({ acceptsWarnings: true })))
    expect(answers.map(({ status }) => status).toSorted()).toEqual([201, 409, 409, 409, 409])
    expect(answers.find(({ status }) => status === 409)?.body['code']).toBe('already-published')

    await save(retitled(document, 'Better title'), '"r1"')
    const row = async () => ((await lead.get('/api/charts')).body['charts'] as { id: string }[]).find(({ id }) => id === 'published')
    expect(await row()).toMatchObject({ title: 'Chart published', version: 1, hasDraft: true })
    expect((await ask_({ revision: 2, acceptsWarnings: true })).body['version']).toBe(2)
    expect(await row()).toMatchObject({ title: 'Better title', version: 2, hasDraft: false })
    expect((await junior.get('/api/charts/published/versions/1')).body).toMatchObject({ document, publishedBy: 'Lena Marsh', changeNote: 'First' })
  })

  test('brings what the library lacks, and overwrites nothing that the shop holds', async () => {
    await publish(lead, sound('brings', { causeTitle: 'Filter packed with something else' }))
    const causes = (await junior.get('/api/causes')).body['causes'] as { id: string; title: string }[]
    expect(causes.filter(({ id }) => id === 'filter-packed')).toMatchObject([{ title: 'Filter packed' }])
  })

  test('what a walk pins: the newest version of every chart in reach, the first one first', async () => {
    await publish(lead, sound('far'), sound('near', { jumps: 'far' }), sound('first', { jumps: 'near' }))
    const charts = (await junior.get('/api/charts/first/reach')).body['charts'] as { chartId: string; version: number }[]
    expect(charts.map(({ chartId, version }) => [chartId, version])).toEqual([
      ['first', 1],
      ['near', 1],
      ['far', 1],
    ])
  })

  test('a start that leaves out a chart in its reach is refused', async () => {
    const { walkId, events } = logOf(shop.person('junior'), [started()])
    const pins = (given: Record<string, number>) => ({
      ...events[0],
      at: shop.deps.clock().toISOString(),
      payload: { ...events[0]?.payload, chartId: 'first', startId: 's', pins: given },
    })
    const answer = await send(junior, walkId, [pins({ first: 1, near: 1 }) as never])
    expect(answer.results).toMatchObject([{ status: 'refused', code: 'no-such-version' }])
  })

  test('a version and an event are facts: the database itself refuses to change or remove one', async () => {
    const { walkId, events } = logOf(shop.person('junior'), [started()])
    await send(junior, walkId, events)
    const facts = [
      () => shop.deps.db.update(chartVersions).set({ changeNote: 'other' }),
      () => shop.deps.db.delete(chartVersions),
      () => shop.deps.db.update(walkEvents).set({ seq: 5 }),
      () => shop.deps.db.delete(walkEvents).where(eq(walkEvents.walkId, walkId)),
    ]
    for (const change of facts) await expect(change()).rejects.toMatchObject({ cause: { code: '23000' } })
  })
})

describe('what does it do', () => {
  beforeAll(() =>
    publish(
      lead,
      sound('no-rev', { title: "Won't reach full speed", searchWords: ["won't rev out", 'bogs', 'no power in the cut', 'gutless'] }),
      sound('creeps', { title: 'Chain creeps at idle', searchWords: ['chain moves when idling', "won't stop"] }),
      sound('accent', { title: 'Démarre mal', searchWords: ['á froid'] }),
    ),
  )
  const find = async (words: string) =>
    (await junior.get(`/api/symptoms?q=${encodeURIComponent(words)}`)).body['symptoms'] as { chartId: string; matched: string | null }[]

  test.each([
    ["won't reach full speed", 'no-rev', null],
    ['doesnt rev out', 'no-rev', "won't rev out"],
    ['WONT REACH FULL SPEED', 'no-rev', null],
    ['wont reech full sped', 'no-rev', null],
    ['it has no power when cutting', 'no-rev', 'no power in the cut'],
    ['boggs', 'no-rev', 'bogs'],
    ['creeping chain', 'creeps', null],
    ['idling', 'creeps', 'chain moves when idling'],
    ['demarre mal', 'accent', null],
    ['DÉMARRE', 'accent', null],
    ['a froid', 'accent', 'á froid'],
  ])('%s', async (words, chartId, matched) => {
    const [best] = await find(words)
    expect(best?.chartId).toBe(chartId)
    if (matched !== null) expect(best?.matched).toBe(matched)
  })

  test('everything for no words, nothing for other words, and no harm from any', async () => {
    expect((await find('')).length).toBeGreaterThan(3)
    expect(await find('   ')).toHaveLength((await find('')).length)
    expect(await find('xylophone')).toEqual([])
    for (const words of [
      "'",
      '"',
      '\\',
      '%',
      '_',
      '&|!():*<->',
      "'; drop table walks; --",
      '"unfinished',
      '-',
      '<script>',
      '🪚',
      'a'.repeat(200),
      '-power',
      'or or or',
    ]) {
      expect((await junior.get(`/api/symptoms?q=${encodeURIComponent(words)}`)).status).toBe(200)
    }
    expect((await junior.get(`/api/symptoms?q=${'a'.repeat(201)}`)).status).toBe(422)
  })

  test('the words of a new version take the place of the old ones', async () => {
    const document = sound('renamed', { title: 'Squeals', searchWords: ['whistles'] })
    await publish(lead, document)
    await save({ ...document, searchWords: ['shrieks'] }, '"r1"')
    await lead.post('/api/charts/renamed/publish', { revision: 2, changeNote: 'Words', acceptsWarnings: true })
    expect((await find('shrieks')).map(({ chartId }) => chartId)).toContain('renamed')
    expect((await find('whistles')).map(({ chartId }) => chartId)).not.toContain('renamed')
  })
})

describe('script tags in every text field', () => {
  test('come back as the text that they are', async () => {
    const tag = '<img src=x onerror=alert(1)><script>alert(1)</script>'
    const text = JSON.stringify(sound('tagged', { title: 'TAG', searchWords: ['TAG'], causeTitle: 'TAG' })).replaceAll('TAG', tag.replaceAll('"', ''))
    const document = JSON.parse(text) as ChartDocument
    await publish(lead, document)
    const version = await junior.get('/api/charts/tagged/versions/1')
    expect(version.body['document']).toEqual(document)
    expect(version.headers.get('content-type')).toBe('application/json; charset=utf-8')
    expect((await find('tagged')).length).toBeGreaterThanOrEqual(0)
    async function find(words: string) {
      return (await junior.get(`/api/symptoms?q=${words}`)).body['symptoms'] as { title: string }[]
    }
  })
})
