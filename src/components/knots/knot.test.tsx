import { render, screen } from '@testing-library/react'
import { expect, test } from 'vitest'

import { nodeKinds } from '#shared/trade/node-kinds.ts'

import { Balloon } from './balloon.tsx'
import { Trail } from './cord.tsx'
import type { KnotKind } from './knot.tsx'
import { Knot, knotWords } from './knot.tsx'

test('no two kinds of node share a shape, so that none is told apart by colour', () => {
  const kinds: readonly KnotKind[] = [...nodeKinds, 'jump-returns', 'waiting', 'spent']
  const shapes = kinds.map((kind) => {
    const { container, unmount } = render(<Knot kind={kind} />)
    const shape = [...container.querySelectorAll('path')].map((path) => `${path.getAttribute('d')} ${path.getAttribute('fill') === 'currentColor'}`).join('|')
    unmount()
    return shape
  })
  expect(new Set(shapes).size).toBe(kinds.length)
})

test('a knot is decoration unless it is given words, and then it is a picture with a name', () => {
  const { rerender } = render(<Knot kind="proof" />)
  expect(screen.queryByRole('img')).toBeNull()
  rerender(<Knot kind="proof" label={knotWords.proof} />)
  expect(screen.getByRole('img', { name: 'Proof' })).toBeVisible()
})

test('a trail is a list in its order, each knot with its words', () => {
  render(
    <Trail
      words="Checks so far"
      knots={[
        { key: 'a', kind: 'start', label: 'Won’t reach full speed' },
        { key: 'b', kind: 'check', look: 'current', label: 'Check 2' },
      ]}
    />,
  )
  expect(screen.getByRole('list', { name: 'Checks so far' })).toBeVisible()
  expect(screen.getAllByRole('img').map((knot) => knot.getAttribute('aria-label'))).toEqual(['Won’t reach full speed', 'Check 2'])
})

test('the numeral of a balloon is part of the name of its button', () => {
  render(
    <button type="button">
      <Balloon numeral={2} /> Bubbles
    </button>,
  )
  expect(screen.getByRole('button', { name: '2 Bubbles' })).toBeVisible()
})
