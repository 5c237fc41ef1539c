import { screen, waitFor, within } from '@testing-library/react'
import { expect, test } from 'vitest'

import { buildChart } from '#tests/support/chart-builder.ts'
import { fakeApi } from '#tests/support/fake-api.ts'
import { FakeBench } from '#tests/support/fake-walks.ts'
import { renderApp } from '#tests/support/render-app.tsx'
import { buildSession, sessionEndpoint } from '#tests/support/session-builder.ts'
import { sawSketch } from '#tests/support/walk-charts.ts'

const sawOnly = buildChart({ ...sawSketch, more: { ...sawSketch.more, appliesTo: { classes: ['chain-saw', 'line-trimmer'], engines: ['two-stroke', 'four-stroke'] } } })

function openBench(path = '/', bench = new FakeBench(sawOnly)) {
  const { calls } = fakeApi([sessionEndpoint({ session: buildSession('junior') }), ...bench.endpoints])
  return { bench, calls, ...renderApp(path) }
}

const started = ({ calls }: { calls: readonly { method: string; path: string; body: unknown }[] }) => calls.filter(({ method, path }) => method === 'POST' && path === '/api/walks')

test('two taps start a walk: the symptom, then Start', async () => {
  const { calls, user, router } = openBench()
  await user.click(await screen.findByRole('link', { name: /Start s/ }))
  await user.click(await screen.findByRole('button', { name: 'Start' }))
  await waitFor(() => expect(router.state.location.pathname).toMatch(/^\/walks\//))
  expect(started({ calls })).toHaveLength(1)
  expect(started({ calls })[0]?.body).toMatchObject({
    event: { type: 'started', seq: 1, payload: { kind: 'bench', chartId: 'saw', startId: 's', pins: { saw: 1 }, machine: { class: 'chain-saw', engine: 'two-stroke' } } },
  })
})

test('the machine of the last walk is the answer already given for the next one', async () => {
  localStorage.setItem('pullcord.last-machine', JSON.stringify({ class: 'line-trimmer', engine: 'four-stroke' }))
  openBench('/start/saw')
  expect(await screen.findByRole('radio', { name: 'Line trimmer' })).toBeChecked()
  expect(screen.getByRole('radio', { name: 'Four-stroke' })).toBeChecked()
})

test('a start whose answer was lost is tried again as the same walk', async () => {
  const { bench, calls, user, router } = openBench('/start/saw')
  bench.losesAnswers = true
  await user.click(await screen.findByRole('button', { name: 'Start' }))
  expect(await screen.findByRole('alert')).toHaveTextContent('The server does not answer.')
  bench.losesAnswers = false
  await user.click(screen.getByRole('button', { name: 'Start' }))
  await waitFor(() => expect(router.state.location.pathname).toMatch(/^\/walks\//))
  const [first, second] = started({ calls })
  expect(second?.body).toEqual(first?.body)
  expect(bench.log).toHaveLength(1)
})

test('a slash brings the keyboard to the search, and the arrow down from there to what was found', async () => {
  const { user } = openBench()
  await screen.findByRole('link', { name: /Start s/ })
  await user.keyboard('/')
  expect(screen.getByRole('searchbox', { name: 'What does it do?' })).toHaveFocus()
  await user.keyboard('no guts')
  const results = await screen.findByRole('region', { name: '“no guts”' })
  await user.keyboard('{ArrowDown}')
  expect(within(results).getByRole('link', { name: /Start s/ })).toHaveFocus()
})

test('the number of a symptom is its key', async () => {
  const { user, router } = openBench()
  await screen.findByRole('link', { name: /Start s/ })
  await user.keyboard('1')
  await waitFor(() => expect(router.state.location.pathname).toBe('/start/saw'))
})

test('an open walk stands on the bench with its way back in', async () => {
  const bench = new FakeBench(sawOnly)
  bench.begin()
  openBench('/', bench)
  const walks = await screen.findByRole('region', { name: 'My open walks' })
  expect(await within(walks).findByRole('link', { name: /Go on/ })).toHaveAttribute('href', `/walks/${bench.walkId}`)
})
