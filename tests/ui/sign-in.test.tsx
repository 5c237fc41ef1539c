import { screen, waitFor, within } from '@testing-library/react'
import { expect, test } from 'vitest'

import { searchSymptoms } from '#shared/api/charts.ts'
import { createFirstOwner, getSession, listSessions, signIn, signOut } from '#shared/api/session.ts'
import { listWalks } from '#shared/api/walks.ts'
import { fakeApi, ok, problem } from '#tests/support/fake-api.ts'
import { renderApp } from '#tests/support/render-app.tsx'
import { buildSession, sessionEndpoint } from '#tests/support/session-builder.ts'

/** The bench of a shop where nothing happened yet. */
const emptyBench = [
  { method: 'GET', path: /^\/api\/walks(\?.*)?$/, contract: listWalks, answer: () => ok({ walks: [], page: 1, hasMore: false }) },
  { method: 'GET', path: /^\/api\/symptoms/, contract: searchSymptoms, answer: () => ok({ symptoms: [] }) },
]

/** Waits until the bench has asked for all that it shows, so that nothing is asked after the test. */
async function atTheBench(): Promise<void> {
  expect(await screen.findByRole('heading', { level: 1, name: 'Bench' })).toBeVisible()
  expect(await screen.findByRole('searchbox', { name: 'What does it do?' })).toBeVisible()
}

const noSessions = { method: 'GET', path: '/api/sessions', contract: listSessions, answer: () => ok({ sessions: [] }) }

function shopWhere(holder: { session: ReturnType<typeof buildSession> }, password = 'a bench with a view') {
  return fakeApi([
    sessionEndpoint(holder),
    noSessions,
    ...emptyBench,
    {
      method: 'POST',
      path: '/api/session',
      contract: signIn,
      answer: (body) => {
        if (JSON.stringify(body).includes(password)) {
          holder.session = buildSession('junior', { demoSignIns: holder.session.demoSignIns })
          return ok(holder.session)
        }
        return problem(401, 'wrong-sign-in', 'E-mail and password do not fit together.')
      },
    },
    {
      method: 'DELETE',
      path: '/api/session',
      contract: signOut,
      answer: () => {
        holder.session = buildSession(null)
        return ok(holder.session)
      },
    },
  ])
}

test('who is not signed in is led to the sign-in page and back to where they wanted to go', async () => {
  shopWhere({ session: buildSession(null) })
  const { user, router } = renderApp('/account')
  await user.type(await screen.findByRole('textbox', { name: 'E-mail' }), 'junior@shop.example')
  await user.type(screen.getByLabelText('Password'), 'a bench with a view')
  await user.click(screen.getByRole('button', { name: 'Sign in' }))
  expect(await screen.findByRole('heading', { level: 1, name: 'Your account' })).toBeVisible()
  expect(router.state.location.pathname).toBe('/account')
})

test('a wrong password is refused in words, with the password ready to be written again', async () => {
  shopWhere({ session: buildSession(null) })
  const { user } = renderApp('/sign-in')
  await user.type(await screen.findByRole('textbox', { name: 'E-mail' }), 'junior@shop.example')
  await user.type(screen.getByLabelText('Password'), 'wrong')
  await user.click(screen.getByRole('button', { name: 'Sign in' }))
  expect(await screen.findByRole('alert')).toHaveTextContent('E-mail and password do not fit together.')
  expect(screen.getByLabelText('Password')).toHaveFocus()
  expect(screen.getByRole('textbox', { name: 'E-mail' })).toHaveValue('junior@shop.example')
})

test('empty fields are named beside themselves and nothing is sent', async () => {
  const { calls } = shopWhere({ session: buildSession(null) })
  const { user } = renderApp('/sign-in')
  await user.click(await screen.findByRole('button', { name: 'Sign in' }))
  expect(screen.getByRole('textbox', { name: 'E-mail' })).toHaveAccessibleDescription(/Write an e-mail address/)
  expect(screen.getByLabelText('Password')).toHaveAccessibleDescription('Write your password.')
  expect(screen.getByRole('textbox', { name: 'E-mail' })).toHaveFocus()
  expect(calls.filter(({ method }) => method === 'POST')).toEqual([])
})

test('the demo shop offers its people, a press fills the form and the person still signs in', async () => {
  const demoSignIns = [{ name: 'Mara Kessler', role: 'junior' as const, email: 'mara@shop.example', password: 'a bench with a view' }]
  const { calls } = shopWhere({ session: buildSession(null, { demoSignIns }) })
  const { user } = renderApp('/sign-in')
  await user.click(await screen.findByRole('button', { name: /Mara Kessler/ }))
  expect(screen.getByRole('textbox', { name: 'E-mail' })).toHaveValue('mara@shop.example')
  expect(calls.filter(({ method }) => method === 'POST')).toEqual([])
  await user.click(screen.getByRole('button', { name: 'Sign in' }))
  await atTheBench()
  expect(calls.some(({ method }) => method === 'POST')).toBe(true)
})

test('a real shop shows no demo people and no demo banner', async () => {
  shopWhere({ session: buildSession(null) })
  renderApp('/sign-in')
  expect(await screen.findByRole('button', { name: 'Sign in' })).toBeVisible()
  expect(screen.queryByText('Demo people')).toBeNull()
  expect(screen.queryByText('start your own')).toBeNull()
})

test('signing out leads to an empty sign-in page that does not remember where one was', async () => {
  shopWhere({ session: buildSession('junior') })
  const { user, router } = renderApp('/account')
  await user.click(await screen.findByRole('button', { name: /Mara K\./ }))
  await user.click(screen.getByRole('button', { name: 'Sign out' }))
  expect(await screen.findByRole('heading', { level: 1, name: 'Sign in' })).toBeVisible()
  expect(router.state.location.search).toBe('')
})

test('a session that ended meanwhile leads to the sign-in page and remembers the page', async () => {
  const holder = { session: buildSession('junior') }
  fakeApi([
    sessionEndpoint(holder),
    { method: 'GET', path: '/api/sessions', contract: listSessions, answer: () => problem(401, 'signed-out', 'You are signed out.') },
  ])
  const { router } = renderApp('/account')
  expect(await screen.findByRole('heading', { level: 1, name: 'Sign in' })).toBeVisible()
  await waitFor(() => expect(router.state.location.search).toBe('?next=%2Faccount'))
})

test('a junior who asks for the people page is led to the bench, and nothing of it is asked of the server', async () => {
  const { calls } = fakeApi([
    sessionEndpoint({ session: buildSession('junior') }),
    ...emptyBench,
  ])
  const { router } = renderApp('/people')
  await atTheBench()
  expect(router.state.location.pathname).toBe('/')
  expect(calls.some(({ path }) => path === '/api/people')).toBe(false)
})

test('a server that does not answer is said to be silent, with a way to try again', async () => {
  fakeApi([{ method: 'GET', path: '/api/session', contract: getSession, answer: () => Promise.reject(new TypeError('Failed to fetch')) }])
  renderApp('/sign-in')
  expect(await screen.findByRole('heading', { level: 1, name: 'The server does not answer' })).toBeVisible()
  expect(screen.getByRole('button', { name: 'Load the page again' })).toBeVisible()
})

test('a new shop asks for its first owner, who gives the printed code', async () => {
  const holder = { session: buildSession(null, { needsOwner: true }) }
  fakeApi([
    sessionEndpoint(holder),
    {
      method: 'POST',
      path: '/api/owner',
      contract: createFirstOwner,
      answer: () => problem(403, 'wrong-code', 'This is not the code.', [{ pointer: '#/code', detail: 'This is not the code that the server printed last.' }]),
    },
  ])
  const { user } = renderApp('/sign-in')
  const code = await screen.findByRole('textbox', { name: 'One-time code' })
  await user.type(code, 'abc')
  await user.type(screen.getByRole('textbox', { name: 'Your name' }), 'Ines Okafor')
  await user.type(screen.getByRole('textbox', { name: 'E-mail' }), 'ines@shop.example')
  await user.type(screen.getByLabelText('Password'), 'fifteen letters and more')
  await user.click(screen.getByRole('button', { name: 'Open the shop' }))
  await waitFor(() => expect(code).toHaveAccessibleDescription(/not the code that the server printed last/))
  expect(code).toHaveFocus()
  expect(within(screen.getByRole('main')).getByRole('textbox', { name: 'Your name' })).toHaveValue('Ines Okafor')
})
