import { expect, test } from 'vitest'

import { createChart } from '#shared/api/charts.ts'
import type { ChartDocument } from '#shared/chart/document.ts'
import { paths } from '#src/lib/paths.ts'
import { bothHands, thumb } from '#tests/support/browser.ts'
import { ask, buildChart, check, jump, start } from '#tests/support/chart-builder.ts'

import { proveThePlug, readLowTwice, saw } from './routes.ts'
import { shopOfFile } from './shop.ts'
import type { Technician } from './technician.ts'

const shop = shopOfFile()

/** A chart that leads into charts that nobody has written yet: one of them to go on in, the other to come back from. */
function smokesChart(id: string, title: string): ChartDocument {
  const outcomes = [
    { id: 'white', title: 'White and thick', reproduced: true },
    { id: 'blue', title: 'Blue and thin', reproduced: true },
    { id: 'else', title: 'Does something else' },
    { id: 'none', title: 'No smoke' },
  ]
  return buildChart({
    id,
    title,
    nodes: [
      start('s', { title }),
      check('n1', outcomes, { title: 'What colour is the smoke?', reproduces: true }),
      jump('j1', 'water-in-the-crankcase'),
      jump('j2', 'oil-in-the-mix', { returns: true }),
      check('n2', ['good', 'bad'], { title: 'Does it smoke when warm too?' }),
      ask(),
      { id: 'jp', kind: 'jump', title: 'What else does it do?', pick: 'symptom' },
      ask('a0', { reason: 'could-not-reproduce' }),
    ],
    edges: ['s > n1', 'n1.white > j1', 'n1.blue > j2', 'n1.else > jp', 'n1.none > a0', 'j2 > n2', 'n2.good > ask', 'n2.bad > ask'],
  })
}

/** Publishes a chart through the API, as the lead who sits at the device. */
async function publishAsLead(lead: Technician, document: ChartDocument): Promise<void> {
  const { request } = lead.device.context
  const draft = await request.post(paths.api.charts(), { data: { document } })
  const { revision } = createChart.response.parse(await draft.json())
  const version = await request.post(`${paths.api.charts()}/${document.id}/publish`, { data: { revision, changeNote: 'First version', acceptsWarnings: true } })
  expect(version.status(), await version.text()).toBe(201)
}

test.each(bothHands)('whoever steps back is offered what was answered before, and one tap keeps it, $words', async (hands) => {
  const ivy = await shop.seat('junior', hands)
  await ivy.startWalk('Won’t reach full speed', saw)
  await readLowTwice(ivy)
  await ivy.check('Do choke and throttle plates open all the way?', 'Both fully open')
  await ivy.comesTo('Does the drive turn freely by hand?')

  await ivy.goesBack()
  await ivy.comesTo('Do choke and throttle plates open all the way?')
  await ivy.goesBack()
  await ivy.comesTo('What full speed does it reach without load?')
  await ivy.seesWords('your answer before you stepped back: tap to keep it')
  await ivy.press(ivy.page.getByRole('button', { name: /^Keep 9.840/ }))
  await ivy.comesTo('Do choke and throttle plates open all the way?')
  await ivy.seesWords('your answer before you stepped back: tap to keep it')
  await ivy.answer('Both fully open')
  await ivy.comesTo('Does the drive turn freely by hand?')
  await ivy.leaves()
})

test.each(bothHands)('no answer has three kinds: two go on and are shown again before the lead is asked, could not reproduce ends the walk at the check that reproduces, $words', async (hands) => {
  const ivy = await shop.seat('junior', hands)
  await ivy.startWalk('Won’t reach full speed', saw)
  await ivy.comesTo('What does it do when you open it up?')
  await ivy.givesNoAnswer('Could not reproduce')
  await ivy.seesWords('The symptom does not show. Ask the customer once more when it happens, or ask the lead.')
  await ivy.press(ivy.page.getByText('Close it without an answer'))
  await ivy.answer('Close: could not reproduce')
  await ivy.sees('Could not reproduce')
  await ivy.pressNamed('To the bench', 'link')
  await ivy.sees('Bench')

  await ivy.startWalk('Hard to start (printed table)')
  await ivy.comesTo('Does it start with the fuel cap loosened?')
  await ivy.givesNoAnswer('Not sure')
  await ivy.comesTo('Does it start with the air filter off?')
  await ivy.givesNoAnswer('Can’t do this')
  await ivy.comesTo('Does air pass freely through the fuel line?')
  await ivy.givesNoAnswer('Could not reproduce')
  await ivy.check('What does the plug look like?', 'Clean, sharp edges')
  await ivy.check('Is the plug lead’s insulation whole?', 'Whole')
  await ivy.check('Does the choke shut cold and open warm?', 'Shuts cold, opens warm')
  await ivy.check('Is there water in the fuel sample?', 'One clear layer')
  await ivy.check('Does spark come back with the stop wire off?', 'No change')
  await ivy.done('Connect the stop wire again')

  await ivy.sees(/No cause found|ask the lead/i)
  const skipped = ivy.page.getByRole('heading', { name: 'Without an answer' }).locator('xpath=ancestor::section')
  for (const [check, why] of [
    ['Does it start with the fuel cap loosened?', 'Not sure'],
    ['Does it start with the air filter off?', 'Can’t do this'],
    ['Does air pass freely through the fuel line?', 'Could not reproduce'],
  ] as const) {
    const row = skipped.getByRole('listitem').filter({ hasText: check })
    await row.getByText(why).waitFor()
  }
  await ivy.press(skipped.getByRole('listitem').filter({ hasText: 'air filter off' }).getByRole('button', { name: 'Go back to it' }))
  await ivy.comesTo('Does it start with the air filter off?')
  await ivy.leaves()
})

test.each(bothHands)('a reading is repeated until two tries agree; one that never does has its own outcome, $words', async (hands) => {
  const ivy = await shop.seat('junior', hands)
  await ivy.startWalk('Won’t reach full speed', saw)
  await ivy.check('What does it do when you open it up?', 'Steady, below full')
  await ivy.reading('What full speed does it reach without load?', '9850', '9700')
  await ivy.seesWords(/one more within 50 settles it/)
  await ivy.readValue('9740')
  await ivy.comesTo('Do choke and throttle plates open all the way?')
  await ivy.seesWords(/9\s740.rpm/)

  await ivy.goesBack()
  await ivy.reading('What full speed does it reach without load?', '9000', '9200', '9400', '9600')
  await ivy.typeValue('9800')
  await ivy.seesWords(/not settled in 5 tries/)
  await ivy.answer('Never settles')
  // It goes into the carburettor on the bench, and with nothing found there comes back to where it left.
  await ivy.check('Does the impulse port pulse on a slow pull?', 'Pulses, oil spits')
  await ivy.check('Is the inlet screen of the carburettor bright?', 'Bright, all open')
  await ivy.reading('How high does the metering lever stand?', '1.5')
  await ivy.check('Are both diaphragms soft and flat?', 'Soft, flat, silent')
  await ivy.reading('At what pressure does the needle open?', '15')
  await ivy.reading('What pressure does the needle hold?', '8')
  await ivy.check('Does the throttle shaft rock in its body?', 'No side play')
  await ivy.check('Does air pass every idle and main passage?', 'Every hole blows')
  await ivy.check('Is the ring of the accelerator pump whole?', 'Whole, or no pump')
  await ivy.check('Do the mixture screws stand in the maker’s range?', 'In range, caps fitted')
  await ivy.comesTo('Do choke and throttle plates open all the way?')
  await ivy.leaves()
})

test.each(bothHands)('the end of what the chart knows asks the lead, who reads the walk and answers with where to go on; the answer comes to the junior by itself, $words', async (hands) => {
  const ivy = await shop.seat('junior', hands)
  await ivy.startWalk('Drag at the clutch', { kind: 'Line trimmer' })
  await ivy.check('Does the drive strain, lag or run hot?', 'Strains, lags or heats')
  await ivy.comesTo('Does the shaft or fan turn freely by hand?')
  await ivy.givesNoAnswer('Not sure')
  await ivy.comesTo('The chart ends here without a cause. Ask the lead.')
  const question = `<b>Shaft</b> scrapes, asked ${hands.by}`
  await ivy.writeIn('What the lead should know', question)
  await ivy.answer('Ask the lead')
  await ivy.sees('The lead is asked')
  await ivy.isSaved()

  const tobias = await shop.seat('lead', hands)
  await tobias.page.getByRole('heading', { name: 'Questions to the lead' }).waitFor()
  await tobias.press(tobias.page.getByRole('link', { name: /^Answer/ }).first())
  await tobias.seesWords(question)
  await tobias.pressNamed('Answer')
  await tobias.seesWords('Write the answer first.')
  await tobias.writeIn('Answer', 'Turn it with the head off, then look again.')
  await tobias.pick(tobias.page.getByRole('combobox', { name: 'Go on at' }), '15 Does the shaft or fan turn freely by hand?')
  await tobias.pressNamed('Answer')
  await tobias.page.getByRole('button', { name: /^Answer/ }).waitFor({ state: 'detached' })
  await tobias.leaves()

  // The bench asks the server by itself, every few seconds.
  await ivy.page.clock.fastForward(10_000)
  await ivy.comesTo('Does the shaft or fan turn freely by hand?')
  await ivy.seesWords('Tobias Renk answers')
  await ivy.seesWords('Turn it with the head off, then look again.')
  await ivy.leaves()
})

test('who asks the lead without a word still asks: a question stands on the lead’s bench', async () => {
  const ivy = await shop.seat('junior', thumb)
  await ivy.startWalk('Drag at the clutch', { kind: 'Line trimmer' })
  await ivy.check('Does the drive strain, lag or run hot?', 'Strains, lags or heats')
  await ivy.check('Does the shaft or fan turn freely by hand?', 'Turns freely')
  await ivy.comesTo('The chart ends here without a cause. Ask the lead.')
  await ivy.answer('Ask the lead')
  await ivy.sees('The lead is asked')
  await ivy.seesWords('How do I go on from here?')
  await ivy.isSaved()
  const tobias = await shop.seat('lead', thumb)
  await tobias.press(tobias.page.getByRole('link', { name: /^Answer.*Line trimmer/ }).first())
  await tobias.seesWords('How do I go on from here?')
  await tobias.leaves()
  await ivy.leaves()
})

test.each(bothHands)('a machine that is not safe is held: it wants its tag and the reason, and the walk can end only so, $words', async (hands) => {
  const ivy = await shop.seat('junior', hands)
  await ivy.startWalk('Hard to start (printed table)')
  await ivy.comesTo('Does it start with the fuel cap loosened?')
  await ivy.opens({ more: 'Hold it: not safe to hand back' })
  await ivy.sees('Not safe to hand back')
  await ivy.pressNamed('Hold it: not safe to hand back')
  await ivy.seesWords('Write the number of the tag that hangs on the machine.')
  await ivy.writeIn('Tag number', 'T-117')
  await ivy.writeIn('Why it is not safe', '<script>alert("held")</script> chain catcher is gone')
  await ivy.pressNamed('Hold it: not safe to hand back')
  await ivy.sees('Held: not safe to hand back')
  await ivy.seesWords('T-117')
  await ivy.seesWords('<script>alert("held")</script> chain catcher is gone')
  await ivy.answer('Close: held')
  await ivy.sees('Held: not to be used')
  await ivy.leaves()
})

test.each(bothHands)('a paused walk waits where it was, also for who comes back by the bench, $words', async (hands) => {
  const ivy = await shop.seat('junior', hands)
  await ivy.startWalk('Hard to start (printed table)')
  await ivy.comesTo('Does it start with the fuel cap loosened?')
  await ivy.opens({ more: 'Pause' })
  await ivy.sees('This walk is paused')
  await ivy.seesWords('Next: Does it start with the fuel cap loosened?')
  await ivy.press(ivy.page.getByRole('link', { name: 'Bench' }))
  await ivy.sees('Bench')
  await ivy.goesOnWith('paused')
  await ivy.sees('This walk is paused')
  await ivy.answer('Go on')
  await ivy.comesTo('Does it start with the fuel cap loosened?')
  await ivy.leaves()
})

test.each(bothHands)('a failed run rules the cause out, and the walk goes on from the last check that leads elsewhere, $words', async (hands) => {
  const ivy = await shop.seat('junior', hands)
  await ivy.startWalk('Won’t reach full speed', saw)
  await proveThePlug(ivy)
  await ivy.answer('Fix done')
  await ivy.sees('Run it, tick each thing off')
  await ivy.failInRun('Starts easily, rope winds home')
  await ivy.answer('The run failed')
  // The proof is taken back, and can go no other way than on.
  await ivy.comesTo('Is full speed back with a good plug?')
  await ivy.readValue('9860')
  await ivy.comesTo('How wide is the plug gap?')
  await ivy.opens({ more: 'Trail: go back to a check' })
  await ivy.sees('Trail')
  await ivy.leaves()
})

test.each(bothHands)('another symptom goes on in its own chart or is picked; a jump to a chart that is not there says so, and asks the lead or passes over it, $words', async (hands) => {
  const smokes = `Smokes white (${hands.by})`
  const tobias = await shop.seat('lead', hands)
  await publishAsLead(tobias, smokesChart(`smokes-white-${hands.by}`, smokes))
  await tobias.leaves()

  const ivy = await shop.seat('junior', hands)
  await ivy.startWalk('Won’t reach full speed', saw)
  await ivy.check('What does it do when you open it up?', 'Lives on the bulb')
  await ivy.comesTo('What does the fuel sample look like?')
  await ivy.goesBack()
  await ivy.check('What does it do when you open it up?', 'Does something else')
  await ivy.sees('Pick what it does')
  await ivy.answer(smokes)
  await ivy.check('What colour is the smoke?', 'White and thick')
  await ivy.seesWords('The next chart is not there yet. Ask the lead how to go on.')
  await ivy.seesWords('Nobody is asked yet.')
  // The ends of the walk stand behind a press of their own: until then their keys end nothing.
  await ivy.rest()
  await ivy.page.keyboard.press('1')
  await ivy.press(ivy.page.locator('main').getByRole('button', { name: 'Ask the lead' }))
  await ivy.sees('Ask the lead')
  await ivy.writeIn('Question', 'Which chart is for one that smokes white?')
  await ivy.pressNamed('Ask, and go on')
  await ivy.sees('The lead is asked')
  await ivy.seesWords('waiting for the lead')
  await ivy.goesBack()
  await ivy.check('What colour is the smoke?', 'Blue and thin')
  await ivy.comesTo('Does it smoke when warm too?')
  await ivy.seesWords('Passed over on the way')
  await ivy.seesWords(/that chart is not on the bench yet/)
  await ivy.goesBack()
  await ivy.check('What colour is the smoke?', 'Does something else')
  await ivy.sees('What else does it do?')
  await ivy.answer('Drag at the clutch')
  await ivy.comesTo('Does the drive strain, lag or run hot?')
  await ivy.leaves()
})

test('a second tap of a wet finger within a third of a second counts for nothing, and a caution is not read by the tap that came before it', async () => {
  const ivy = await shop.seat('junior', thumb)
  const { clock } = ivy.page
  await ivy.press(ivy.page.getByRole('link', { name: 'Hard to start (printed table)' }))
  await ivy.page.getByRole('group', { name: 'Machine' }).waitFor()
  // The clock stands still from here on: only what is said goes by.
  await clock.pauseAt(new Date(Date.now() + 3_600_000))
  await ivy.page.getByRole('button', { name: 'Start', exact: true }).tap()
  const read = ivy.page.getByRole('button', { name: 'Read it' })
  while (!(await read.isVisible())) await clock.runFor(10)
  await clock.runFor(500)
  await read.tap({ force: true })
  expect(await read.isVisible()).toBe(true)
  await clock.runFor(100)
  await read.tap()

  const first = ivy.page.getByRole('heading', { level: 1, name: 'Does it start with the fuel cap loosened?' })
  await first.waitFor()
  await clock.runFor(240)
  await ivy.outcome('No change').tap()
  expect(await first.isVisible()).toBe(true)
  await clock.runFor(200)
  await ivy.outcome('No change').tap()
  expect(await first.isVisible()).toBe(false)

  const second = ivy.page.getByRole('button', { name: 'Undo' })
  await clock.runFor(300)
  await second.tap()
  expect(await second.isVisible()).toBe(true)
  await clock.runFor(100)
  await second.tap()
  await first.waitFor()
  await ivy.leaves()
})
