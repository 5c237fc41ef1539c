import { render, screen } from '@testing-library/react'
import { userEvent } from '@testing-library/user-event'
import { expect, test, vi } from 'vitest'

import type { NodeId } from '#shared/lib/ids.ts'
import { drawChart } from '#shared/plots/chart-picture.ts'
import { buildChart, soundSketch } from '#tests/support/chart-builder.ts'
import { ChartPicture } from './chart-picture.tsx'

const id = (text: string): NodeId => text as NodeId
const chart = buildChart(soundSketch)
const route = { nodes: [id('s'), id('n1'), id('n2')], edges: [], current: id('n2') }

test('a picture without choices is one image with its summary, and can be scrolled by key', () => {
  render(<ChartPicture picture={drawChart(chart)} />)
  expect(screen.getByRole('img', { name: /Chart under test.*2 checks, 1 proof, 1 cause/ })).toBeInTheDocument()
  expect(screen.getByRole('region', { name: 'Chart under test' })).toHaveAttribute('tabindex', '0')
  expect(screen.queryByRole('button')).not.toBeInTheDocument()
})

test('nodes to choose from are named, and the chosen one says so', async () => {
  const onSelect = vi.fn()
  const picture = drawChart(chart)
  const { rerender } = render(<ChartPicture picture={picture} onSelect={onSelect} />)
  const proof = screen.getByRole('button', { name: /Proof.*Prove filter-packed.*1 Gone, 2 Still there/ })
  await userEvent.setup().click(proof)
  expect(onSelect).toHaveBeenCalledExactlyOnceWith('p2')
  rerender(<ChartPicture picture={picture} onSelect={onSelect} highlight={id('p2')} />)
  expect(screen.getByRole('button', { pressed: true })).toBe(proof)
})

test('the nodes are one tab stop, arrow keys follow the route, Enter chooses', async () => {
  const user = userEvent.setup()
  const onSelect = vi.fn()
  render(<ChartPicture picture={drawChart(chart, { route })} onSelect={onSelect} />)
  await user.tab()
  expect(screen.getByRole('button', { name: /^Start/ })).toHaveFocus()
  await user.keyboard('{ArrowDown}{ArrowDown}')
  expect(screen.getByRole('button', { name: /Look at n2.*the route stands here/ })).toHaveFocus()
  await user.keyboard('{Enter}{ArrowUp} ')
  expect(onSelect.mock.calls).toEqual([['n2'], ['n1']])
  await user.tab()
  expect(document.body).toHaveFocus()
  await user.tab({ shift: true })
  expect(screen.getByRole('button', { name: /Look at n1/ })).toHaveFocus()
})

test('words of a chart are only ever text', () => {
  const hostile = buildChart({ ...soundSketch, title: '<script>alert(1)</script>' })
  const { container } = render(<ChartPicture picture={drawChart(hostile)} />)
  expect(container.querySelector('script')).toBeNull()
  expect(container.querySelector('title')).toHaveTextContent('<script>alert(1)</script>')
})
