import { expect, test } from 'vitest'

import type { Hands } from '#tests/support/browser.ts'
import { bothHands, thumb } from '#tests/support/browser.ts'

import { shopOfFile, signInOf } from './shop.ts'
import { Technician } from './technician.ts'

const shop = shopOfFile()

/** A device of somebody who is not signed in; what they may be refused on it is no fault. */
async function stranger(hands: Hands): Promise<Technician> {
  const device = await shop.openDevice(hands)
  device.allow(/status of 4\d\d/)
  return new Technician(device)
}

const password = 'brown kettle under nine maples'

test.each(bothHands)('the owner adds a person, who sets a password by the link once and signs in; deactivated they are out at once, $words', async (hands) => {
  const email = `jonah-${hands.by}@alder-row.example`
  const owner = await shop.seat('owner', hands)
  await owner.pressNamed('People', 'link')
  await owner.sees('People')
  await owner.pressNamed('Add a person')
  await owner.writeIn('Name', 'Jonah Pell')
  await owner.pressNamed('Add and make the link')
  await owner.page.locator('#add-person ~ form [aria-invalid="true"]').waitFor()
  await owner.writeIn('E-mail', email)
  await owner.pressNamed('Add and make the link')
  await owner.seesWords('Hand this link to Jonah Pell')
  const link = await owner.page.getByRole('textbox', { name: 'One-time link' }).inputValue()
  await owner.pressNamed('Copy the link')
  await owner.seesWords('copied')
  await owner.pressNamed('I have handed it over')
  await owner.seesWords('waiting for a password')

  const jonah = await stranger(hands)
  await jonah.page.goto(link)
  await jonah.findsAgain('Set your password')
  await jonah.writeIn('Password', 'too short')
  await jonah.seesWords('9 of at least 15 characters.')
  await jonah.pressNamed('Set the password')
  await jonah.seesWords('Write at least 15 characters.')
  await jonah.writeIn('Password', 'ä'.repeat(40))
  await jonah.seesWords(/Too long: 80 bytes of at most 72/)
  await jonah.writeIn('Password', password)
  await jonah.pressNamed('Set the password')
  await jonah.sees('The password is set')
  await jonah.page.goto(link)
  await jonah.findsAgain('This link does not work')
  await jonah.seesWords('This link was used, has expired, or was replaced by a newer one. Ask your owner for a new link.')
  await jonah.signIn({ email, password })

  await owner.reloads()
  const row = owner.page.getByRole('button', { name: 'Change Jonah Pell' }).last()
  await owner.press(row)
  await owner.pressNamed('Deactivate')
  await owner.seesWords('Jonah Pell is deactivated and signed out everywhere.')
  await jonah.press(jonah.page.getByRole('link', { name: 'Hard to start (printed table)' }))
  await jonah.sees('Sign in')
  await jonah.writeIn('E-mail', email)
  await jonah.writeIn('Password', password)
  await jonah.pressNamed('Sign in')
  await jonah.seesWords('E-mail or password is wrong. Check both; your owner can give you a new link.')

  await owner.pressNamed('Undo')
  await owner.page.getByRole('button', { name: 'Undo' }).waitFor({ state: 'detached' })
  await jonah.pressNamed('Sign in')
  await jonah.sees('Start a walk')
  await owner.leaves()
  await jonah.leaves()
})

test.each(bothHands)('sign-in refuses in words, alike for a known and an unknown address, shows and takes a pasted password, and leads where one wanted to go, $words', async (hands) => {
  const ivy = await stranger(hands)
  await ivy.page.goto('/account')
  await ivy.findsAgain('Sign in')
  await ivy.pressNamed('Sign in')
  expect(await ivy.page.locator('[aria-invalid="true"]').count()).toBe(2)

  const refusals: string[] = []
  for (const email of [signInOf('junior').email, 'nobody@alder-row.example']) {
    await ivy.writeIn('E-mail', email)
    await ivy.writeIn('Password', 'not my gloves at all')
    await ivy.pressNamed('Sign in')
    await ivy.page.getByRole('alert').getByText('E-mail or password is wrong.').waitFor()
    await ivy.page.getByRole('button', { name: 'Sign in', exact: true }).waitFor()
    refusals.push((await ivy.page.getByRole('alert').textContent()) ?? '')
  }
  expect(refusals[0]).toBe(refusals[1])

  const field = ivy.page.getByRole('textbox', { name: 'Password' })
  await ivy.pressNamed('Show password')
  expect(await field.getAttribute('type')).toBe('text')
  await ivy.pressNamed('Hide password')
  expect(await field.getAttribute('type')).toBe('password')
  await ivy.writeIn('E-mail', signInOf('junior').email)
  await ivy.write(field, '')
  await ivy.page.evaluate((text) => navigator.clipboard.writeText(text), signInOf('junior').password)
  await ivy.page.keyboard.press('ControlOrMeta+a')
  await ivy.page.keyboard.press('ControlOrMeta+v')
  await ivy.pressNamed('Sign in')
  await ivy.sees('Your account')
  await ivy.leaves()
})

test('what only an owner sees is no way for a junior, by link or by address', async () => {
  const ivy = await shop.seat('junior', thumb)
  expect(await ivy.page.getByRole('link', { name: 'People' }).count()).toBe(0)
  await ivy.page.goto('/people')
  await ivy.findsAgain('Bench')
  await ivy.leaves()
})
