import { expect, test } from 'vitest'

import { keyboard } from '#tests/support/browser.ts'

import { shopOfFile } from './shop.ts'
import { Technician } from './technician.ts'

const shop = shopOfFile({ DEMO: '0' })

test('the first owner of a shop comes in by the code that the server printed, and only once', async () => {
  const code = /good once[^\n]*\n\s*(\S+)/.exec(shop.process().words)?.[1]
  if (code === undefined) throw new Error(`No code in: ${shop.process().words}`)
  const device = await shop.openDevice(keyboard)
  device.allow(/status of 4\d\d/)
  const owner = new Technician(device)
  await owner.page.goto('/')
  await owner.findsAgain('Become its owner')
  await owner.writeIn('One-time code', 'NOT0-THIS-CODE')
  await owner.writeIn('Your name', 'Edda Brandt')
  await owner.writeIn('E-mail', 'edda@brandt-small-engines.example')
  await owner.writeIn('Password', 'brown kettle under nine maples')
  await owner.pressNamed('Open the shop')
  await owner.seesWords(/This is not the code that the server printed/)

  // As people type it: small letters, no dashes.
  await owner.writeIn('One-time code', code.toLowerCase().replaceAll('-', ' '))
  await owner.pressNamed('Open the shop')
  await owner.sees('Bench')
  await owner.seesWords('No chart is on the bench yet')
  expect(await owner.page.getByText('Demo shop').count()).toBe(0)

  await owner.page.goto('/set-up')
  await owner.findsAgain('Bench')
  await owner.leaves()
})
