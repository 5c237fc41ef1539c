import { expect, test } from 'vitest'

import { keyboard, thumb } from '#tests/support/browser.ts'

import { saw } from './routes.ts'
import { shopOfFile } from './shop.ts'
import type { Technician } from './technician.ts'

const shop = shopOfFile()
const speed = 'What full speed does it reach without load?'

async function comeToTheReading(ivy: Technician): Promise<void> {
  await ivy.startWalk('Won’t reach full speed', saw)
  await ivy.check('What does it do when you open it up?', 'Steady, below full')
  await ivy.sees(speed)
}

/** Types over what stands in the field. */
async function typeAnew(ivy: Technician, text: string): Promise<void> {
  await ivy.write(ivy.value, text)
}

/** What was read from the field is only shown; the walk has moved on nowhere. */
async function isNotRecorded(ivy: Technician): Promise<void> {
  await ivy.page.keyboard.press('Enter')
  await ivy.findsAgain(speed)
  expect(await ivy.page.getByText(/First try/).count()).toBe(0)
}

test('what cannot be read as a value gets words, is not recorded, and stays in the field', async () => {
  const ivy = await shop.seat('junior', keyboard)
  await comeToTheReading(ivy)
  for (const [typed, words] of [
    ['about ten', 'This cannot be read as a number. Type the value in digits.'],
    ['9850x', 'This cannot be read as a number. Type the value alone, in digits.'],
    ['9850 9840', 'That looks like more than one number. Type one value; a repeat is taken as its own try.'],
    ['1.2.3', 'There is more than one decimal mark in it. Write it with one, for example 7.5.'],
    ['-5', 'That is less than the instrument can show. Look at the sign and type it again.'],
    ['9850000', 'That is more than the instrument can show. Look at the decimal mark and type it again.'],
    ['98 psi', 'This field takes rpm, and you typed psi. Choose psi as its unit if it is offered, or type the value in rpm.'],
  ] as const) {
    await typeAnew(ivy, typed)
    await ivy.seesWords(words)
    await isNotRecorded(ivy)
    expect(await ivy.value.inputValue(), typed).toBe(typed)
  }
  await typeAnew(ivy, '')
  await ivy.page.keyboard.press('Backspace')
  await isNotRecorded(ivy)
  await ivy.page.getByRole('status').getByText('No value yet. Type what the instrument shows').waitFor()
  await ivy.leaves()
})

test('what can be read two ways is shown back before it counts: with a point as decimal mark “1,275” is 1275, “1.275” one and a bit, “2 800” and full-width digits are read', async () => {
  const ivy = await shop.seat('junior', keyboard)
  await comeToTheReading(ivy)
  for (const [typed, read] of [
    ['1,275', /Read as 1\s275.rpm/],
    ['1.275', /Read as 1\.275.rpm/],
    ['2 800', /Read as 2\s800.rpm/],
    ['９８５０', /Read as 9\s850.rpm/],
    ['9850 rpm', /Read as 9\s850.rpm/],
  ] as const) {
    await typeAnew(ivy, typed)
    await ivy.seesWords(read)
    await ivy.seesWords('Below the limits')
  }
  await ivy.page.keyboard.press('Enter')
  await ivy.seesWords(/First try 9\s850/)
  await ivy.leaves()
})

test('by thumb the pad types digits and the decimal mark, and its last digit is taken back; Record without a value says what is missing', async () => {
  const ivy = await shop.seat('junior', thumb)
  await comeToTheReading(ivy)
  await ivy.page.getByRole('button', { name: /^Record/ }).tap({ force: true })
  await ivy.page.getByRole('status').getByText('No value yet. Type what the instrument shows').waitFor()
  await ivy.typeValue('98.5')
  await ivy.seesWords(/Read as 98\.5.rpm/)
  for (let digit = 0; digit < 2; digit += 1) await ivy.page.getByRole('button', { name: 'Erase the last digit' }).tap()
  await ivy.typeValue('50')
  expect(await ivy.value.inputValue()).toBe('9850')
  await ivy.leaves()
})

test('whatever stands in a note stays text: a script in it is read, not run', async () => {
  const ivy = await shop.seat('junior', keyboard)
  const nasty = '<script>document.title="run"</script><img src=x onerror="document.title=1">{{7*7}}'
  await ivy.startWalk('Hard to start (printed table)')
  await ivy.comesTo('Does it start with the fuel cap loosened?')
  await ivy.opens('Note')
  await ivy.sees('Write a note')
  await ivy.writeIn('Note', nasty)
  await ivy.pressNamed('Keep the note')
  await ivy.comesTo('Does it start with the fuel cap loosened?')
  await ivy.opens('Ask the lead')
  await ivy.sees('Ask the lead')
  await ivy.writeIn('Question', nasty)
  await ivy.pressNamed('Ask, and go on')
  await ivy.comesTo('Does it start with the fuel cap loosened?')
  await ivy.opens('Ask the lead')
  await ivy.seesWords(nasty)
  expect(await ivy.page.locator('main img, main script').count()).toBe(0)
  expect(await ivy.page.title()).toMatch(/^Ask the lead/)
  await ivy.leaves()
})

test('a note of more than 10 kB is refused in words and keeps every letter', async () => {
  const ivy = await shop.seat('junior', keyboard)
  await ivy.startWalk('Hard to start (printed table)')
  await ivy.comesTo('Does it start with the fuel cap loosened?')
  await ivy.opens('Note')
  const long = 'rope frayed '.repeat(9000)
  await ivy.writeIn('Note', long)
  await ivy.pressNamed('Keep the note')
  await ivy.seesWords('A note holds at most 10 kB. Shorten it, or split it into two notes.')
  expect(await ivy.page.getByRole('textbox', { name: 'Note' }).inputValue()).toBe(long)
  await ivy.leaves()
})
