import { expect, test } from 'vitest'

import { bothHands, keyboard, thumb } from '#tests/support/browser.ts'

import { saw } from './routes.ts'
import { shopOfFile } from './shop.ts'

const shop = shopOfFile()
const plates = 'Do choke and throttle plates open all the way?'
const speed = 'What full speed does it reach without load?'

test.each(bothHands)('a walk goes on after a reload, with the first try of a reading still there, and after the server was killed and started again, $words', async (hands) => {
  const ivy = await shop.seat('junior', hands)
  await ivy.startWalk('Won’t reach full speed', saw)
  await ivy.check('What does it do when you open it up?', 'Steady, below full')
  await ivy.reading(speed, '9850')
  await ivy.seesWords(/First try 9\s850/)
  await ivy.isSaved()

  await ivy.reloads()
  await ivy.findsAgain(speed)
  await ivy.seesWords(/First try 9\s850/)
  await ivy.readValue('9840')
  await ivy.sees(plates)
  await ivy.isSaved()

  await shop.process().kill()
  await shop.process().start()
  await ivy.reloads()
  await ivy.findsAgain(plates)
  await ivy.seesWords(/9\s840.rpm/)
  await ivy.answer('Both fully open')
  await ivy.comesTo('Does the drive turn freely by hand?')
  await ivy.isSaved()
  await ivy.leaves()
})

test('a walk goes on at another device after signing in there, and what the first one still enters is set aside in words', async () => {
  const atThePhone = await shop.seat('junior', thumb)
  await atThePhone.startWalk('Hard to start (printed table)')
  await atThePhone.check('Does it start with the fuel cap loosened?', 'No change')
  await atThePhone.comesTo('Does it start with the air filter off?')
  await atThePhone.isSaved()

  const atTheDesk = await shop.seat('junior', keyboard)
  await atTheDesk.goesOnWith('hard to start')
  await atTheDesk.sees('This walk is in hand on another device')
  await atTheDesk.answer('Go on here')
  await atTheDesk.check('Does it start with the air filter off?', 'No change')
  await atTheDesk.isSaved()

  await atThePhone.answer('Starts, filter off')
  await atThePhone.seesWords(/2\sentries were set aside/)
  await atThePhone.seesWords('Starts, filter off')
  // Nothing that would be refused is on offer.
  expect(await atThePhone.page.getByRole('button', { name: /Back|Undo|No answer|make it safe/ }).count()).toBe(0)
  await atThePhone.pressNamed('Understood')
  await atThePhone.sees('This walk is in hand on another device')
  await atTheDesk.leaves()
  await atThePhone.leaves()
})

test.each(bothHands)('a server that is lost in the middle of a walk holds nobody up: what is tapped waits on the page, says so, and is sent when the server is back, $words', async (hands) => {
  const ivy = await shop.seat('junior', hands)
  ivy.device.allow(/ERR_CONNECTION_REFUSED|ERR_CONNECTION_RESET|ERR_EMPTY_RESPONSE/)
  await ivy.startWalk('Hard to start (printed table)')
  await ivy.check('Does it start with the fuel cap loosened?', 'No change')
  await ivy.comesTo('Does it start with the air filter off?')
  await ivy.isSaved()

  await shop.process().kill()
  await ivy.answer('No change')
  await ivy.comesTo('Does air pass freely through the fuel line?')
  await ivy.seesWords(/\d not sent yet/)
  await ivy.seesWords(/the server does not answer/i)
  await ivy.answer('Passes freely')
  await ivy.comesTo('What does the plug look like?')
  await ivy.seesWords(/\d not sent yet/)

  await shop.process().start()
  await ivy.pressNamed('Try now')
  await ivy.isSaved()
  await ivy.reloads()
  await ivy.findsAgain('What does the plug look like?')
  expect(await ivy.page.getByText('set aside').count()).toBe(0)
  await ivy.leaves()
})

test('whoever opens a page while the server is lost reads what happened and what is safe', async () => {
  const ivy = await shop.seat('junior', thumb)
  ivy.device.allow(/ERR_CONNECTION_REFUSED|ERR_CONNECTION_RESET|ERR_EMPTY_RESPONSE/)
  const start = ivy.page.getByRole('link', { name: 'Hard to start (printed table)' })
  await start.waitFor()
  await shop.process().kill()
  await start.tap()
  await ivy.seesWords(/The server does not answer/)
  await shop.process().start()
  await ivy.comesToTheBench()
  await ivy.leaves()
})
