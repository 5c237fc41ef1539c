import { screen, waitFor, within } from '@testing-library/react'
import type { userEvent } from '@testing-library/user-event'
import { beforeAll, expect, test, vi } from 'vitest'

import type { Colleague } from '#shared/api/people.ts'
import { listActivePeople } from '#shared/api/people.ts'
import type { SpecLimits } from '#shared/units/limits.ts'
import { setShortcutsOn } from '#src/lib/shortcuts.ts'
import { buildChart, type ChartSketch } from '#tests/support/chart-builder.ts'
import type { FakeAnswer } from '#tests/support/fake-api.ts'
import { fakeApi, ok, problem } from '#tests/support/fake-api.ts'
import { FakeBench } from '#tests/support/fake-walks.ts'
import { renderApp } from '#tests/support/render-app.tsx'
import { buildSession, personId, sessionEndpoint } from '#tests/support/session-builder.ts'
import { sawSketch } from '#tests/support/walk-charts.ts'

// The guards against slips measure with the page's own clock; here it stands still unless a hand rests.
beforeAll(() => void vi.useFakeTimers({ toFake: ['performance'] }))

/** The time that a hand takes between two acts: longer than every guard, a caution's included. */
const rest = () => vi.advanceTimersByTime(1000)

type User = ReturnType<typeof userEvent.setup>

function openWalk(sketch: ChartSketch = sawSketch, limits: SpecLimits = {}) {
  const bench = new FakeBench(buildChart(sketch)).begin(limits)
  fakeApi([sessionEndpoint({ session: buildSession('junior') }), ...bench.endpoints])
  const { user } = renderApp(`/walks/${bench.walkId}`)
  return { bench, user }
}

const at = (title: string | RegExp) => screen.findByRole('heading', { level: 1, name: title })
const outcome = (name: string | RegExp) => screen.getByRole('button', { name })

/** Answers the page once the hand has rested, and waits for the next one. */
async function answer(user: User, name: string | RegExp, next: string | RegExp): Promise<void> {
  rest()
  await user.click(outcome(name))
  await at(next)
}

async function toReading(user: User): Promise<void> {
  await at('Look at n1')
  await answer(user, /It does it/, 'Measure n2')
}

async function type(user: User, keys: string): Promise<void> {
  for (const key of keys)
    await user.click(within(screen.getByRole('group', { name: 'Number pad' })).getByRole('button', { name: key === '.' ? 'decimal point' : key }))
}

const lastEvent = (bench: FakeBench) => bench.log.at(-1)

test('each page has its own heading, which takes the focus, and its own name of the tab', async () => {
  const { user } = openWalk()
  const first = await at('Look at n1')
  await waitFor(() => expect(document.title).toContain('Look at n1'))
  rest()
  await user.click(outcome(/It does it/))
  expect(first).not.toBeInTheDocument()
  await waitFor(async () => expect(await at('Measure n2')).toHaveFocus())
  await waitFor(() => expect(document.title).toContain('Measure n2'))
})

test('outcomes that have just appeared take no tap, and a second tap on the heels of the first is a slip', async () => {
  const { bench, user } = openWalk()
  await at('Look at n1')
  await user.click(outcome(/It does it/))
  expect(bench.log).toHaveLength(1)
  await answer(user, /It does it/, 'Measure n2')
  // The slip lands where the next page has a button of its own.
  await user.click(outcome(/Never settles/))
  await waitFor(() => expect(screen.getByText('saved')).toBeVisible())
  expect(bench.log.map(({ type: kind }) => kind)).toEqual(['started', 'finding-recorded'])
})

test('a caution is read only after a moment, and names every caution that waits', async () => {
  const { bench, user } = openWalk({
    ...sawSketch,
    cautions: [
      { id: 'gas', word: 'DANGER', harm: 'death', hazard: 'Exhaust gas kills', avoid: 'Run it outdoors', standing: true },
      { id: 'edge', word: 'CAUTION', harm: 'minor-injury', hazard: 'Cutters cut', avoid: 'Wear gloves', standing: true },
    ],
  })
  await at(/Danger/)
  expect(screen.getByText('Cutters cut')).toBeVisible()
  vi.advanceTimersByTime(500)
  await user.click(outcome('Read it'))
  expect(bench.log).toHaveLength(1)
  await answer(user, 'Read it', 'Look at n1')
  await waitFor(() => expect(lastEvent(bench)).toMatchObject({ type: 'caution-acknowledged', payload: { cautionIds: ['gas', 'edge'] } }))
})

test('a typed value is judged at once, shown back, and recorded as it was typed with the limits it was judged by', async () => {
  const { bench, user } = openWalk()
  await toReading(user)
  await type(user, '98500')
  await user.click(outcome('Erase the last digit'))
  expect(screen.getByRole('textbox')).toHaveValue('9850')
  expect(screen.getByText('Low')).toBeVisible()
  await answer(user, /^Record/, 'Look at n3')
  await waitFor(() =>
    expect(lastEvent(bench)).toMatchObject({
      type: 'finding-recorded',
      payload: { outcome: 'low', value: 9850, unit: '1/min', typed: '9850', judgedBy: 'limits', limits: { min: 11_000, unit: '1/min' } },
    }),
  )
})

test('a value that cannot be read is refused in words and never recorded', async () => {
  const { bench, user } = openWalk()
  await toReading(user)
  await type(user, '9.8.5')
  expect(screen.getByText(/more than one decimal mark/)).toBeVisible()
  rest()
  await user.click(outcome(/^Record/))
  expect(await at('Measure n2')).toBeVisible()
  await waitFor(() => expect(screen.getByText('saved')).toBeVisible())
  expect(lastEvent(bench)).toMatchObject({ payload: { node: 'saw/n1' } })
})

test('a mark between the digits is read by the shop’s number format and shown back before it counts', async () => {
  const { user } = openWalk()
  await toReading(user)
  await user.type(screen.getByRole('textbox'), '9,850')
  expect(screen.getByText(/^Read as 9\s850\srpm\.$/)).toBeVisible()
})

const repeating: ChartSketch = {
  ...sawSketch,
  nodes: sawSketch.nodes.map((node) => (node['id'] === 'n2' ? { ...node, repeat: { equal: 2, within: 50, atMost: 3 } } : node)),
}

test('a reading repeats until its values agree; all of them are recorded and the last one counts', async () => {
  const { bench, user } = openWalk(repeating)
  await toReading(user)
  await type(user, '9800')
  rest()
  await user.click(outcome(/^Take 9/))
  expect(screen.getByText(/First try 9\s800/)).toBeVisible()
  await type(user, '9830')
  await answer(user, /^Record 9/, 'Look at n3')
  await waitFor(() => expect(lastEvent(bench)).toMatchObject({ payload: { value: 9830, values: [9800, 9830], outcome: 'low' } }))
})

test('values that never agree lead to the outcome that says so, picked by hand', async () => {
  const { bench, user } = openWalk(repeating)
  await toReading(user)
  for (const value of ['9000', '9500']) {
    await type(user, value)
    rest()
    await user.click(outcome(/^Take 9/))
  }
  await type(user, '9900')
  expect(screen.queryByRole('button', { name: /^Record/ })).not.toBeInTheDocument()
  await answer(user, /Never settles/, 'Look at n4')
  await waitFor(() => expect(lastEvent(bench)).toMatchObject({ payload: { outcome: 'hunts', judgedBy: 'hand', values: [9000, 9500, 9900] } }))
})

test('where nobody knows the limits the value is noted and the person says what it means', async () => {
  const { bench, user } = openWalk({
    ...sawSketch,
    specKeys: [{ id: 'fullSpeed', title: 'Full speed', quantity: 'rotational-speed', unit: '1/min' }],
    nodes: sawSketch.nodes.map((node) => (node['id'] === 'n2' ? { ...node, limits: { spec: 'fullSpeed' } } : node)),
  })
  await toReading(user)
  expect(screen.getByText(/No limits are known/)).toBeVisible()
  await type(user, '9850')
  await answer(user, /Low/, 'Look at n3')
  await waitFor(() => expect(lastEvent(bench)).toMatchObject({ payload: { outcome: 'low', value: 9850, judgedBy: 'hand' } }))
  expect(lastEvent(bench)?.payload).not.toHaveProperty('limits')
})

test('what is undone is offered again, and one tap keeps it', async () => {
  const { bench, user } = openWalk()
  await toReading(user)
  await type(user, '9850')
  await answer(user, /^Record/, 'Look at n3')
  rest()
  await user.click(outcome('Undo'))
  await at('Measure n2')
  await answer(user, /^Keep 9/, 'Look at n3')
  await waitFor(() => expect(lastEvent(bench)).toMatchObject({ type: 'finding-recorded', payload: { value: 9850 } }))
  expect(lastEvent(bench)?.payload).toHaveProperty('reuses')
})

test('no answer asks why, and says where the walk goes on', async () => {
  const { bench, user } = openWalk()
  await toReading(user)
  await type(user, '9850')
  await answer(user, /^Record/, 'Look at n3')
  rest()
  await user.click(outcome(/^0 No answer/))
  expect(screen.getByText(/goes on as “Light”/)).toBeVisible()
  await answer(user, /Can’t do this/, 'Look at n4')
  await waitFor(() => expect(lastEvent(bench)).toMatchObject({ type: 'check-skipped', payload: { node: 'saw/n3', why: 'cannot' } }))
})

test('single keys answer, step back and open the note; none acts while a field is written in, or when they are switched off', async () => {
  const { bench, user } = openWalk()
  await at('Look at n1')
  rest()
  await user.keyboard('1')
  await at('Measure n2')
  await user.keyboard('r')
  expect(screen.getByRole('textbox')).toHaveFocus()
  await user.keyboard('9850{Enter}')
  expect(screen.getByRole('textbox')).toHaveValue('9850')
  rest()
  await user.keyboard('{Enter}')
  await at('Look at n3')
  rest()
  await user.keyboard('{Backspace}')
  await at('Measure n2')
  setShortcutsOn(false)
  rest()
  await user.keyboard('{Backspace}')
  await waitFor(() => expect(screen.getByText('saved')).toBeVisible())
  expect(bench.walk.node).toBe('saw/n2')
  setShortcutsOn(true)
})

/** From the first check straight to the filter: the proof that follows has no reading to compare with yet. */
const unread: ChartSketch = { ...sawSketch, edges: sawSketch.edges.map((edge) => (edge === 'n1.yes > n2' ? 'n1.yes > n3' : edge)) }

test('a proof takes what it compares with first, and carries it along when it is recorded', async () => {
  const { bench, user } = openWalk(unread)
  await at('Look at n1')
  await answer(user, /It does it/, 'Look at n3')
  await answer(user, /dark/i, 'Measure n2')
  expect(screen.getByText(/Nothing is changed yet/)).toBeVisible()
  await type(user, '9850')
  await answer(user, /^Record/, 'Prove filter-packed')
  expect(within(screen.getByRole('definition')).getByText(/9\s850\srpm/)).toBeVisible()
  await type(user, '12400')
  await answer(user, /Gone/, 'Filter packed')
  await waitFor(() => expect(bench.walk.phase).toBe('proven'))
  expect(bench.log.at(-2)).toMatchObject({
    payload: { node: 'saw/p3', outcome: 'gone', value: 12_400, before: { outcome: 'low', value: 9850, unit: '1/min' } },
  })
})

test('a proof whose reading was in limits before the change says why its value proves nothing, takes it, and lets the person judge', async () => {
  const { bench, user } = openWalk(unread)
  await at('Look at n1')
  await answer(user, /It does it/, 'Look at n3')
  await answer(user, /dark/i, 'Measure n2')
  await type(user, '12100')
  await answer(user, /^Record/, 'Prove filter-packed')
  expect(screen.getByText(/it was “In limits” already, so the value alone proves nothing/)).toBeVisible()
  await type(user, '12400')
  expect(screen.queryByRole('button', { name: /^Record/ })).not.toBeInTheDocument()
  expect(outcome(/Still/)).toBeVisible()
  await answer(user, /Gone/, 'Filter packed')
  await waitFor(() =>
    expect(bench.log.at(-2)).toMatchObject({
      payload: { node: 'saw/p3', outcome: 'gone', value: 12_400, judgedBy: 'hand', before: { outcome: 'in', value: 12_100 } },
    }),
  )
})

test('a proof whose reading was out of limits before the change is judged by its value, without a word about that', async () => {
  const { user } = openWalk(unread)
  await at('Look at n1')
  await answer(user, /It does it/, 'Look at n3')
  await answer(user, /dark/i, 'Measure n2')
  await type(user, '9850')
  await answer(user, /^Record/, 'Prove filter-packed')
  expect(screen.queryByText(/proves nothing/)).not.toBeInTheDocument()
  await type(user, '12400')
  expect(screen.queryByRole('button', { name: /Still/ })).not.toBeInTheDocument()
})

test('a lost server shows a bar and blocks nothing; what was tapped is sent when it is back', async () => {
  const { bench, user } = openWalk()
  await at('Look at n1')
  bench.isDown = true
  await answer(user, /It does it/, 'Measure n2')
  expect(await screen.findByText(/the server does not answer/)).toBeVisible()
  await type(user, '9850')
  await answer(user, /^Record/, 'Look at n3')
  expect(screen.getAllByText('2 not sent yet').length).toBeGreaterThan(0)
  expect(bench.log).toHaveLength(1)
  bench.isDown = false
  await user.click(outcome('Try now'))
  expect(await screen.findByText('saved')).toBeVisible()
  expect(bench.log).toHaveLength(3)
})

test('a walk that is in hand on another device is never gone on with by accident', async () => {
  const bench = new FakeBench(buildChart(sawSketch)).begin()
  localStorage.removeItem('pullcord.device')
  bench.log = bench.log.map((event) => ({ ...event, deviceId: '01900000-0000-7000-8000-0000000000aa' as typeof event.deviceId }))
  fakeApi([sessionEndpoint({ session: buildSession('junior') }), ...bench.endpoints])
  const { user } = renderApp(`/walks/${bench.walkId}`)
  await at('This walk is in hand on another device')
  await answer(user, /Go on here/, 'Look at n1')
  await waitFor(() => expect(lastEvent(bench)?.type).toBe('resumed'))
})

test('a machine is held with a tag number and a reason, and with nothing less', async () => {
  const { bench, user } = openWalk()
  await at('Look at n1')
  await user.click(outcome('More'))
  await user.click(await screen.findByRole('button', { name: /Hold it/ }))
  await at('Not safe to hand back')
  rest()
  await user.click(outcome(/^Hold it: not safe/))
  expect(within(screen.getByRole('main')).getByText(/Write the number of the tag/)).toBeVisible()
  expect(screen.getByRole('textbox', { name: 'Tag number' })).toHaveFocus()
  await user.type(screen.getByRole('textbox', { name: 'Tag number' }), '17')
  await user.type(screen.getByRole('textbox', { name: 'Why it is not safe' }), 'The drum is cracked.')
  rest()
  await user.click(outcome(/^Hold it: not safe/))
  await at('Held: not safe to hand back')
  await waitFor(() => expect(lastEvent(bench)).toMatchObject({ type: 'held', payload: { tagNo: '17', why: 'The drum is cracked.' } }))
})

const me: Colleague = { id: personId(3), name: 'Mara Kessler', role: 'junior' }

/** A walk in hand, at its page "Hand over", in a shop that answers so when asked who is in it. */
async function openHandOver(answerOfShop: () => FakeAnswer) {
  const bench = new FakeBench(buildChart(sawSketch)).begin()
  fakeApi([
    sessionEndpoint({ session: buildSession('junior') }),
    { method: 'GET', path: '/api/people/active', contract: listActivePeople, answer: answerOfShop },
    ...bench.endpoints,
  ])
  const { user } = renderApp(`/walks/${bench.walkId}`)
  await at('Look at n1')
  await user.click(outcome('More'))
  await user.click(await screen.findByRole('button', { name: 'Hand over' }))
  await at('Hand over')
  return { bench, user }
}

test('a walk is handed to anybody of the shop, also to one who was never in it; the leads come first and oneself is not listed', async () => {
  const { bench, user } = await openHandOver(() =>
    ok({
      people: [
        { id: personId(7), name: 'Abe Quill', role: 'junior' },
        { id: personId(1), name: 'Ines Okafor', role: 'owner' },
        me,
        { id: personId(2), name: 'Tomas Brandt', role: 'lead' },
        { id: personId(6), name: 'Una Vale', role: 'lead' },
      ],
    }),
  )
  const choices = within(await screen.findByRole('group', { name: 'To whom' })).getAllByRole<HTMLInputElement>('radio')
  expect(choices.map(({ labels }) => labels?.[0]?.textContent)).toEqual([
    'Tomas BrandtLead technician',
    'Una ValeLead technician',
    'Ines OkaforShop owner',
    'Abe QuillJunior technician',
  ])
  expect(choices[0]).toBeChecked()
  await user.click(screen.getByRole('radio', { name: /Abe Quill/ }))
  await user.type(screen.getByRole('textbox', { name: /What they should know/ }), 'The plug is out.')
  await answer(user, 'Hand over', 'Handed over to Abe Quill')
  await waitFor(() => expect(lastEvent(bench)).toMatchObject({ type: 'handed-over', payload: { to: personId(7), why: 'The plug is out.' } }))
})

test('with nobody else in the shop the page says so, and hands nothing over', async () => {
  await openHandOver(() => ok({ people: [me] }))
  expect(await screen.findByText(/Nobody else of the shop can sign in/)).toBeVisible()
  expect(screen.queryByRole('button', { name: 'Hand over' })).not.toBeInTheDocument()
})

test('a list of people that cannot be read is said to be that, with what can be done meanwhile', async () => {
  await openHandOver(() => problem(503, 'busy', 'The server is busy. Try again in a moment.'))
  expect(await screen.findByText(/The server is busy/)).toHaveTextContent(/pause it/)
  expect(screen.queryByText(/Nobody else/)).not.toBeInTheDocument()
})
