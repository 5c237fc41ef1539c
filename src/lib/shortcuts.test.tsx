import { render, screen } from '@testing-library/react'
import { userEvent } from '@testing-library/user-event'
import { useState } from 'react'
import { afterEach, expect, test } from 'vitest'

import { setShortcutsOn, useShortcut, useShortcutList } from './shortcuts.ts'

afterEach(() => setShortcutsOn(true))

function Bench() {
  const [taken, setTaken] = useState(0)
  useShortcut('1', 'No bubbles', () => setTaken(taken + 1))
  const keys = useShortcutList()
  return (
    <>
      <output>{taken}</output>
      <ul>
        {keys.map(({ key, words }) => (
          <li key={`${key} ${words}`}>{`${key}: ${words}`}</li>
        ))}
      </ul>
      <input aria-label="Note" />
      <button type="button">Other</button>
    </>
  )
}

function OnTop() {
  useShortcut('1', 'First cause', () => undefined)
  return null
}

test('a key acts once a press, with what the page knows now, and stands in the list of keys', async () => {
  const user = userEvent.setup()
  render(<Bench />)
  await user.keyboard('11')
  expect(screen.getByRole('status')).toHaveTextContent('2')
  expect(screen.getByRole('listitem')).toHaveTextContent('1: No bubbles')
})

test('no key acts while a field has the focus, while a button has it all do', async () => {
  const user = userEvent.setup()
  render(<Bench />)
  await user.type(screen.getByRole('textbox', { name: 'Note' }), '1')
  expect(screen.getByRole('status')).toHaveTextContent('0')
  expect(screen.getByRole('textbox', { name: 'Note' })).toHaveValue('1')
  screen.getByRole('button', { name: 'Other' }).focus()
  await user.keyboard('1')
  expect(screen.getByRole('status')).toHaveTextContent('1')
})

test('a key with Ctrl, Alt or Meta belongs to the browser', async () => {
  const user = userEvent.setup()
  render(<Bench />)
  await user.keyboard('{Control>}1{/Control}{Alt>}1{/Alt}{Meta>}1{/Meta}')
  expect(screen.getByRole('status')).toHaveTextContent('0')
})

test('while a dialog covers the page, the page’s keys rest', async () => {
  const user = userEvent.setup()
  render(
    <>
      <Bench />
      <div role="dialog" aria-label="Keys" />
    </>,
  )
  await user.keyboard('1')
  expect(screen.getByRole('status')).toHaveTextContent('0')
})

test('all single keys can be switched off', async () => {
  const user = userEvent.setup()
  render(<Bench />)
  setShortcutsOn(false)
  await user.keyboard('1')
  expect(screen.getByRole('status')).toHaveTextContent('0')
  setShortcutsOn(true)
  await user.keyboard('1')
  expect(screen.getByRole('status')).toHaveTextContent('1')
})

test('what came last answers first, and a page that is gone answers no more', async () => {
  const user = userEvent.setup()
  const { rerender, unmount } = render(
    <>
      <Bench />
      <OnTop />
    </>,
  )
  await user.keyboard('1')
  expect(screen.getByRole('status')).toHaveTextContent('0')
  rerender(
    <>
      <Bench />
    </>,
  )
  await user.keyboard('1')
  expect(screen.getByRole('status')).toHaveTextContent('1')
  unmount()
  await user.keyboard('1')
})
