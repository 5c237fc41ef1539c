import { screen, waitFor, within } from '@testing-library/react'
import { expect, test } from 'vitest'

import type { Person } from '#shared/api/people.ts'
import { addPerson, createLink, getLink, listPeople, updatePerson, useLink as acceptLink } from '#shared/api/people.ts'
import type { FakeEndpoint } from '#tests/support/fake-api.ts'
import { fakeApi, ok, problem } from '#tests/support/fake-api.ts'
import { renderApp } from '#tests/support/render-app.tsx'
import { buildSession, personId, sessionEndpoint } from '#tests/support/session-builder.ts'

const expiresAt = '2999-01-01T00:00:00.000Z'
const url = 'http://127.0.0.1:3000/link/one-time-token'

function buildPerson(number: number, more: Partial<Person> = {}): Person {
  return {
    id: personId(number),
    name: `Person ${number}`,
    email: `p${number}@shop.example`,
    role: 'junior',
    status: 'active',
    linkExpiresAt: null,
    lastSeenAt: null,
    ...more,
  }
}

function shopWith(people: Person[], more: readonly FakeEndpoint[] = []) {
  return fakeApi([
    ...more,
    sessionEndpoint({ session: buildSession('owner') }),
    { method: 'GET', path: '/api/people', contract: listPeople, answer: () => ok({ people }) },
    {
      method: 'PATCH',
      path: /^\/api\/people\/[^/]+$/,
      contract: updatePerson,
      answer: (body, path) => {
        const at = people.findIndex(({ id }) => path.endsWith(id))
        const sent = updatePerson.body.parse(body)
        const old = people[at] ?? buildPerson(0)
        const person: Person = {
          ...old,
          ...(sent.name !== undefined && { name: sent.name }),
          ...(sent.role !== undefined && { role: sent.role }),
          ...(sent.isActive !== undefined && { status: sent.isActive ? 'active' : 'deactivated' }),
        }
        people[at] = person
        return ok({ person })
      },
    },
  ])
}

const owner = buildPerson(1, { name: 'Ines Okafor', role: 'owner' })

test('the owner reads who is in the shop, in which role, and where they stand', async () => {
  shopWith([
    owner,
    buildPerson(4, { name: 'Jo Lind', status: 'invited', linkExpiresAt: expiresAt }),
    buildPerson(5, { name: 'Old Hand', status: 'deactivated' }),
  ])
  renderApp('/people')
  const table = await screen.findByRole('table', { name: 'People of the shop' })
  expect(within(table).getByRole('row', { name: /Ines Okafor \(you\).*Shop owner.*active/ })).toBeVisible()
  expect(within(table).getByRole('row', { name: /Jo Lind.*waiting for a password/ })).toBeVisible()
  expect(within(table).getByRole('row', { name: /Old Hand.*deactivated/ })).toBeVisible()
})

test('adding a person shows the one-time link once, and it goes when it was handed over', async () => {
  shopWith(
    [owner],
    [
      {
        method: 'POST',
        path: '/api/people',
        contract: addPerson,
        answer: () => ok({ person: buildPerson(6, { name: 'Jo Lind', status: 'invited', linkExpiresAt: expiresAt }), link: { url, expiresAt } }),
      },
    ],
  )
  const { user } = renderApp('/people')
  await user.click(await screen.findByRole('button', { name: 'Add a person' }))
  expect(screen.getByRole('textbox', { name: 'Name' })).toHaveFocus()
  await user.keyboard('Jo Lind')
  await user.type(screen.getByRole('textbox', { name: 'E-mail' }), 'jo@shop.example')
  await user.click(screen.getByRole('radio', { name: /Lead technician/ }))
  await user.click(screen.getByRole('button', { name: 'Add and make the link' }))
  expect(await screen.findByRole('heading', { name: 'Hand this link to Jo Lind' })).toHaveFocus()
  expect(screen.getByRole('textbox', { name: 'One-time link' })).toHaveValue(url)
  await user.click(screen.getByRole('button', { name: 'Copy the link' }))
  expect(await screen.findByText('copied')).toBeVisible()
  await user.click(screen.getByRole('button', { name: 'I have handed it over' }))
  expect(screen.queryByDisplayValue(url)).toBeNull()
})

test('an address that is taken is named at its field, and what was typed stays', async () => {
  shopWith(
    [owner],
    [
      {
        method: 'POST',
        path: '/api/people',
        contract: addPerson,
        answer: () => problem(409, 'e-mail-taken', 'Taken.', [{ pointer: '#/email', detail: 'Somebody has this address already.' }]),
      },
    ],
  )
  const { user } = renderApp('/people')
  await user.click(await screen.findByRole('button', { name: 'Add a person' }))
  await user.type(screen.getByRole('textbox', { name: 'Name' }), 'Jo Lind')
  await user.type(screen.getByRole('textbox', { name: 'E-mail' }), 'p1@shop.example')
  await user.click(screen.getByRole('button', { name: 'Add and make the link' }))
  await waitFor(() => expect(screen.getByRole('textbox', { name: 'E-mail' })).toHaveAccessibleDescription(/Somebody has this address already/))
  expect(screen.getByRole('textbox', { name: 'Name' })).toHaveValue('Jo Lind')
})

test('a changed role is done at once and can be undone', async () => {
  const { calls } = shopWith([owner, buildPerson(3, { name: 'Mara Kessler' })])
  const { user } = renderApp('/people')
  await user.click(await screen.findByRole('button', { name: 'Change Mara Kessler' }))
  await user.click(screen.getByRole('radio', { name: /Lead technician/ }))
  await user.click(screen.getByRole('button', { name: 'Save' }))
  expect(await screen.findByText(/Mara Kessler is now lead technician/)).toBeVisible()
  await user.click(screen.getByRole('button', { name: 'Undo' }))
  await waitFor(() => expect(screen.queryByText(/Mara Kessler is now/)).toBeNull())
  expect(calls.filter(({ method }) => method === 'PATCH').map(({ body }) => body)).toEqual([{ role: 'lead' }, { role: 'junior' }])
})

test('deactivating asks nothing, says what it did and can be undone', async () => {
  const { calls } = shopWith([owner, buildPerson(3, { name: 'Mara Kessler' })])
  const { user } = renderApp('/people')
  await user.click(await screen.findByRole('button', { name: 'Change Mara Kessler' }))
  await user.click(screen.getByRole('button', { name: 'Deactivate' }))
  expect(await screen.findByText('Mara Kessler is deactivated and signed out everywhere.')).toBeVisible()
  expect(screen.queryByRole('dialog')).toBeNull()
  await user.click(screen.getByRole('button', { name: 'Undo' }))
  await waitFor(() => expect(calls.filter(({ method }) => method === 'PATCH').at(-1)?.body).toEqual({ isActive: true }))
})

test('the last owner cannot be made less, and is told so', async () => {
  shopWith(
    [owner],
    [
      {
        method: 'PATCH',
        path: /people/,
        contract: updatePerson,
        answer: () => problem(409, 'last-owner', 'The shop needs an owner. Make somebody else one first.'),
      },
    ],
  )
  const { user } = renderApp('/people')
  await user.click(await screen.findByRole('button', { name: 'Change Ines Okafor' }))
  await user.click(screen.getByRole('radio', { name: /Junior technician/ }))
  await user.click(screen.getByRole('button', { name: 'Save' }))
  expect(await screen.findByRole('alert')).toHaveTextContent('The shop needs an owner. Make somebody else one first.')
})

test('a new link is made for somebody who lost their password', async () => {
  shopWith(
    [owner, buildPerson(3, { name: 'Mara Kessler' })],
    [
      {
        method: 'POST',
        path: /link$/,
        contract: createLink,
        answer: () => ok({ person: buildPerson(3, { name: 'Mara Kessler', linkExpiresAt: expiresAt }), link: { url, expiresAt } }),
      },
    ],
  )
  const { user } = renderApp('/people')
  await user.click(await screen.findByRole('button', { name: 'Change Mara Kessler' }))
  await user.click(screen.getByRole('button', { name: 'Make a password link' }))
  expect(await screen.findByRole('heading', { name: 'Hand this link to Mara Kessler' })).toBeVisible()
})

const linkEndpoints = (answer: FakeEndpoint['answer']): readonly FakeEndpoint[] => [
  { method: 'GET', path: '/api/links/abc', contract: getLink, answer: () => ok({ purpose: 'invite', name: 'Jo Lind', email: 'jo@shop.example', expiresAt }) },
  { method: 'POST', path: '/api/links/abc', contract: acceptLink, answer },
]

test('whoever holds a one-time link sets a password and is sent to sign in', async () => {
  fakeApi(linkEndpoints(() => ok({ done: true })))
  const { user } = renderApp('/link/abc')
  await user.type(await screen.findByLabelText('Password'), 'a bench with a view')
  await user.click(screen.getByRole('button', { name: 'Set the password' }))
  expect(await screen.findByRole('heading', { level: 1, name: 'The password is set' })).toBeVisible()
  expect(screen.getByRole('link', { name: 'Sign in' })).toHaveAttribute('href', '/sign-in')
})

test('a password may be shown and pasted; too short or over 72 bytes it is refused in words and not sent', async () => {
  const { calls } = fakeApi(linkEndpoints(() => ok({ done: true })))
  const { user } = renderApp('/link/abc')
  const field = await screen.findByLabelText('Password')
  await user.click(field)
  await user.paste('too short')
  await user.click(screen.getByRole('button', { name: 'Set the password' }))
  expect(field).toHaveAccessibleDescription(/at least 15 characters/)
  await user.clear(field)
  await user.paste('ü'.repeat(37))
  expect(field).toHaveAccessibleDescription(/Too long: 74 bytes of at most 72/)
  await user.click(screen.getByRole('button', { name: 'Set the password' }))
  expect(calls.filter(({ method }) => method === 'POST')).toEqual([])
  await user.click(screen.getByRole('button', { name: 'Show password' }))
  expect(field).toHaveAttribute('type', 'text')
})

test('a link that was used up says so and names the way out', async () => {
  fakeApi([
    {
      method: 'GET',
      path: '/api/links/old',
      contract: getLink,
      answer: () => problem(410, 'link-used-up', 'This link was used. Ask your owner for a new link.'),
    },
  ])
  renderApp('/link/old')
  expect(await screen.findByRole('heading', { level: 1, name: 'This link does not work' })).toBeVisible()
  expect(screen.getByText('This link was used. Ask your owner for a new link.')).toBeVisible()
})
