import { act, render, screen } from '@testing-library/react'
import { expect, test } from 'vitest'

import { announce } from '#src/lib/announce.ts'

import { LiveRegion } from './live-region.tsx'
import { PageHeading } from './page-heading.tsx'

test('the title changes with the check and the focus goes to its heading', () => {
  const { rerender } = render(
    <>
      <PageHeading tab="Check 1" focusKey="n1">
        Does it idle?
      </PageHeading>
      <button type="button">1</button>
    </>,
  )
  expect(document.title).toBe('Check 1 · Pullcord')
  screen.getByRole('button').focus()
  rerender(
    <>
      <PageHeading tab="Check 2" focusKey="n2">
        Is the filter clean?
      </PageHeading>
      <button type="button">1</button>
    </>,
  )
  expect(document.title).toBe('Check 2 · Pullcord')
  expect(screen.getByRole('heading', { level: 1, name: 'Is the filter clean?' })).toHaveFocus()
})

test('the same page drawn again leaves the focus where it is', () => {
  const page = (words: string) => (
    <>
      <PageHeading tab={words} focusKey="n1">
        {words}
      </PageHeading>
      <button type="button">1</button>
    </>
  )
  const { rerender } = render(page('Check 1'))
  screen.getByRole('button').focus()
  rerender(page('Check 1, 2 min used'))
  expect(screen.getByRole('button')).toHaveFocus()
})

test('what is announced stands in the live region, the same words a second time as well', () => {
  render(<LiveRegion />)
  act(() => announce('Saved'))
  const first = screen.getByText('Saved')
  act(() => announce('Saved'))
  expect(screen.getByRole('status')).toHaveTextContent('Saved')
  expect(screen.getByText('Saved')).not.toBe(first)
})
