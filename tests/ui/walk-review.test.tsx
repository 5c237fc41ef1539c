import { screen, waitFor, within } from '@testing-library/react'
import { expect, test, vi } from 'vitest'

import type { EventId, OutcomeId, Place, QuestionId } from '#shared/lib/ids.ts'
import type { EventDraft } from '#src/lib/walk-log.ts'
import { getDeviceId } from '#src/lib/device.ts'
import { toCsv } from '#src/lib/csv.ts'
import type { WalkEvent } from '#shared/walk/events.ts'
import { buildChart } from '#tests/support/chart-builder.ts'
import { fakeApi } from '#tests/support/fake-api.ts'
import { FakeBench } from '#tests/support/fake-walks.ts'
import { renderApp } from '#tests/support/render-app.tsx'
import { buildSession, personId, sessionEndpoint } from '#tests/support/session-builder.ts'
import { uuid } from '#tests/support/walk-builder.ts'
import { sawSketch } from '#tests/support/walk-charts.ts'

const finding = (node: string, outcome: string, more: object = {}): EventDraft => ({
  type: 'finding-recorded',
  payload: { node: `saw/${node}` as Place, outcome: outcome as OutcomeId, judgedBy: 'hand', photoIds: [], seconds: 4, ...more },
})

/** What the junior did, in order; each event goes through the guard. */
function walked(...drafts: readonly EventDraft[]): FakeBench {
  const bench = new FakeBench(buildChart(sawSketch)).begin()
  drafts.forEach((draft, index) => {
    const event = { id: uuid(200 + index), walkId: bench.walkId, seq: index + 2, at: `2026-03-02T09:0${index + 1}:00.000Z`, deviceId: getDeviceId(), personId: personId(3), ...draft }
    const { results } = bench.append([event as WalkEvent])
    expect(results[0]?.status, draft.type).toBe('appended')
  })
  return bench
}

function review(bench: FakeBench, role: 'lead' | 'junior' = 'lead') {
  const { calls } = fakeApi([sessionEndpoint({ session: buildSession(role) }), ...bench.endpoints])
  return { calls, ...renderApp(`/walks/${bench.walkId}/review`) }
}

const eventId = (index: number) => uuid(200 + index) as EventId

test('the log tells every finding with its value, its mark and its minutes; what was stepped back from is struck through', async () => {
  const bench = walked(
    finding('n1', 'yes'),
    finding('n2', 'low', { value: 9850, unit: '1/min', typed: '9850', judgedBy: 'limits' }),
    finding('n3', 'good'),
    { type: 'stepped-back', payload: { toEventId: eventId(2) } },
    finding('n3', 'dusty', { note: 'Brown dust' }),
  )
  review(bench)
  const log = await screen.findByRole('list', { name: 'Log of the walk' })
  const rows = within(log).getAllByRole('listitem')
  expect(rows.map((row) => row.textContent)).toEqual([
    expect.stringContaining('Started: Start s'),
    expect.stringMatching(/Look at n1.*It does it.*reproduced.*5/s),
    expect.stringMatching(/Measure n2.*9\s850\srpm.*low/s),
    expect.stringMatching(/Look at n3.*1 · Light.*no longer counts/s),
    expect.stringContaining('Stepped back to: Look at n3'),
    expect.stringMatching(/Look at n3.*2 · Dusty.*Brown dust.*serviceable/s),
  ])
})

test('a line chosen in the log is chosen on the chart, and the other way round', async () => {
  const bench = walked(finding('n1', 'yes'), finding('n2', 'low', { value: 9850, unit: '1/min', typed: '9850', judgedBy: 'limits' }))
  const { user } = review(bench)
  const log = await screen.findByRole('list', { name: 'Log of the walk' })
  const chart = within(screen.getByRole('complementary', { name: 'Way on the chart' }))
  await user.click(within(log).getByRole('button', { name: /Look at n1/ }))
  expect(chart.getByRole('button', { name: /Look at n1/ })).toHaveAttribute('aria-pressed', 'true')
  await user.click(chart.getByRole('button', { name: /Measure n2/ }))
  expect(within(log).getByRole('button', { name: /Measure n2/ })).toHaveAttribute('aria-pressed', 'true')
  expect(within(log).getByRole('button', { name: /Look at n1/ })).toHaveAttribute('aria-pressed', 'false')
})

test('a lead answers the question where the walk is read; a junior can’t', async () => {
  const asked: EventDraft = { type: 'asked', payload: { questionId: uuid(900) as QuestionId, text: 'Is that deep enough?', photoIds: [] } }
  const bench = walked(finding('n1', 'yes'), asked)
  const { user } = review(bench)
  expect(await screen.findByText('Is that deep enough?', { selector: 'form p' })).toBeVisible()
  await user.click(screen.getByRole('button', { name: 'Answer' }))
  expect(screen.getByText('Write the answer first.')).toBeVisible()
  await user.type(screen.getByRole('textbox', { name: 'Answer' }), 'Yes. Go on.')
  await user.click(screen.getByRole('button', { name: 'Answer' }))
  await waitFor(() => expect(bench.log.at(-1)).toMatchObject({ type: 'answered', personId: personId(2), payload: { text: 'Yes. Go on.' } }))
  await waitFor(() => expect(screen.queryByRole('textbox', { name: 'Answer' })).not.toBeInTheDocument())
})

test('a junior reads their own walk, without the answer form', async () => {
  const asked: EventDraft = { type: 'asked', payload: { questionId: uuid(900) as QuestionId, text: 'Is that deep enough?', photoIds: [] } }
  review(walked(finding('n1', 'yes'), asked), 'junior')
  expect(await screen.findByRole('list', { name: 'Log of the walk' })).toHaveTextContent('Is that deep enough?')
  expect(screen.queryByRole('textbox', { name: 'Answer' })).not.toBeInTheDocument()
})

test('what was set aside is told in words beside the log', async () => {
  const bench = walked(finding('n1', 'yes'))
  bench.append([{ ...(bench.log.at(-1) as WalkEvent), id: uuid(700) as EventId, seq: 2 }])
  review(bench)
  const aside = await screen.findByRole('region', { name: 'Set aside beside the log' })
  expect(aside).toHaveTextContent(/Look at n1: It does it/)
  expect(aside).toHaveTextContent('the walk went on elsewhere meanwhile')
})

test('the log can be had as a CSV, with every event', async () => {
  const bench = walked(finding('n1', 'yes'), finding('n2', 'low', { value: 9850, unit: '1/min', typed: '9850', judgedBy: 'limits' }))
  const files: Blob[] = []
  vi.stubGlobal('URL', Object.assign(URL, { createObjectURL: (file: Blob) => (files.push(file), 'blob:log'), revokeObjectURL: () => undefined }))
  const { user } = review(bench)
  await user.click(await screen.findByRole('button', { name: 'CSV' }))
  const text = (await files[0]?.text()) ?? ''
  const lines = text.trim().split('\r\n')
  expect(lines).toHaveLength(4)
  expect(lines[3]).toContain('Measure n2,finding-recorded,Low,9850,1/min')
})

test('a text that a spreadsheet would run stays a text', () => {
  expect(toCsv(['note'], [['=HYPERLINK("http://x")'], ['a "quoted" word, and more']])).toBe('note\r\n"\'=HYPERLINK(""http://x"")"\r\n"a ""quoted"" word, and more"\r\n')
})
