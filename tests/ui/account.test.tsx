import { screen, waitFor, within } from '@testing-library/react'
import { expect, test } from 'vitest'

import { changePassword, endSession, listSessions } from '#shared/api/session.ts'
import type { FakeEndpoint } from '#tests/support/fake-api.ts'
import { fakeApi, ok, problem } from '#tests/support/fake-api.ts'
import { renderApp } from '#tests/support/render-app.tsx'
import { buildSession, personId, sessionEndpoint } from '#tests/support/session-builder.ts'

const at = '2026-11-30T09:00:00.000Z'

function accountWith(more: readonly FakeEndpoint[] = []) {
  const sessions = [
    { id: personId(91), isThisOne: true, startedAt: at, lastSeenAt: at, browser: 'Chromium on Linux' },
    { id: personId(92), isThisOne: false, startedAt: at, lastSeenAt: at, browser: 'Safari on iPad' },
  ]
  return fakeApi([
    ...more,
    sessionEndpoint({ session: buildSession('junior') }),
    { method: 'GET', path: '/api/sessions', contract: listSessions, answer: () => ok({ sessions }) },
    {
      method: 'DELETE',
      path: `/api/sessions/${personId(92)}`,
      contract: endSession,
      answer: () => {
        sessions.pop()
        return ok({ done: true })
      },
    },
  ])
}

test('changing the password asks for the present one, and says what it did', async () => {
  const { calls } = accountWith([{ method: 'PUT', path: '/api/session/password', contract: changePassword, answer: () => ok({ done: true }) }])
  const { user } = renderApp('/account')
  await user.type(await screen.findByLabelText('Present password'), 'the one of before')
  await user.type(screen.getByLabelText('New password'), 'a bench with a view')
  await user.click(screen.getByRole('button', { name: 'Change the password' }))
  expect(await screen.findByText('The password is changed')).toBeVisible()
  expect(calls.find(({ method }) => method === 'PUT')?.body).toEqual({ present: 'the one of before', password: 'a bench with a view' })
  expect(screen.getByLabelText('New password')).toHaveValue('')
})

test('a wrong present password is named at its field', async () => {
  accountWith([
    {
      method: 'PUT',
      path: '/api/session/password',
      contract: changePassword,
      answer: () => problem(403, 'wrong-present-password', 'Wrong.', [{ pointer: '#/present', detail: 'This is not your present password.' }]),
    },
  ])
  const { user } = renderApp('/account')
  await user.type(await screen.findByLabelText('Present password'), 'not it')
  await user.type(screen.getByLabelText('New password'), 'a bench with a view')
  await user.click(screen.getByRole('button', { name: 'Change the password' }))
  await waitFor(() => expect(screen.getByLabelText('Present password')).toHaveAccessibleDescription('This is not your present password.'))
})

test('one can sign out elsewhere, but not here from this list', async () => {
  accountWith()
  const { user } = renderApp('/account')
  const table = await screen.findByRole('table', { name: 'Where you are signed in' })
  expect(within(table).getAllByRole('button')).toHaveLength(1)
  await user.click(within(table).getByRole('button', { name: 'Sign out there' }))
  await waitFor(() => expect(within(table).queryByText('Safari on iPad')).toBeNull())
})

test('theme and single keys are set in the person menu, which closes with Escape and gives the focus back', async () => {
  accountWith()
  const { user } = renderApp('/account')
  const button = await screen.findByRole('button', { name: 'Mara K.' })
  await user.click(button)
  await user.selectOptions(screen.getByRole('combobox', { name: 'Theme' }), 'Dark')
  expect(document.documentElement).toHaveAttribute('data-theme', 'dark')
  expect(localStorage.getItem('pullcord.theme')).toBe('dark')
  await user.click(screen.getByRole('checkbox', { name: /Single-key shortcuts/ }))
  expect(localStorage.getItem('pullcord.single-keys')).toBe('off')
  await user.keyboard('{Escape}')
  expect(button).toHaveFocus()
  expect(button).toHaveAttribute('aria-expanded', 'false')
})

test('an address that nothing answers to is said to be none, in the title too', async () => {
  accountWith()
  renderApp('/nowhere')
  expect(await screen.findByRole('heading', { level: 1, name: 'There is no such page' })).toBeVisible()
  expect(document.title).toBe('There is no such page · Pullcord')
  expect(screen.getByRole('link', { name: 'To the bench' })).toHaveAttribute('href', '/')
})
