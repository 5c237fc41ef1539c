import type { Locator, Page } from 'playwright-core'
import { expect } from 'vitest'

import type { Device, Hands } from '#tests/support/browser.ts'
import { readTaps } from '#tests/support/browser.ts'

/** How long a hand rests before it acts: longer than the guards against slips of a wet finger, and than a caution is dead. */
const restMs = 1000
/** More steps with the Tab key than any page has stops. */
const mostStops = 120

/** Somebody with a device in their hands, in the words of the trade. Waits for words on the screen; acts by thumb or by keys alone. */
export class Technician {
  readonly device: Device
  readonly page: Page
  readonly hands: Hands
  #lastTitle = ''

  constructor(device: Device) {
    this.device = device
    this.page = device.page
    this.hands = device.hands
  }

  // Hands

  /** A button, link, row or field that the thumb taps, or that the Tab key is brought to and Enter (for a box to tick: Space) presses. */
  async press(target: Locator): Promise<void> {
    await target.waitFor()
    await this.rest()
    if (this.hands.by === 'touch') return target.tap()
    await this.reach(target)
    await this.page.keyboard.press((await isBox(target)) ? 'Space' : 'Enter')
  }

  async pressNamed(name: string | RegExp, role: 'button' | 'link' = 'button'): Promise<void> {
    await this.press(this.page.getByRole(role, { name, exact: typeof name === 'string' }))
  }

  /** Writes into a field, over what stands in it. */
  async write(field: Locator, text: string): Promise<void> {
    await field.waitFor()
    if (this.hands.by === 'touch') await field.tap()
    else await this.reach(field)
    if ((await field.inputValue()) !== '') await this.page.keyboard.press('ControlOrMeta+a')
    await this.page.keyboard.insertText(text)
  }

  async writeIn(label: string, text: string): Promise<void> {
    await this.write(this.page.getByRole('textbox', { name: label }), text)
  }

  /** Brings the focus to something with the Tab key alone. */
  async reach(target: Locator): Promise<void> {
    for (let stop = 0; stop < mostStops; stop += 1) {
      if (await target.evaluate((element) => element === document.activeElement)) return
      await this.page.keyboard.press('Tab')
    }
    throw new Error(`The Tab key never comes to ${String(target)}`)
  }

  /** The time that a hand takes between two acts. */
  async rest(): Promise<void> {
    await this.page.clock.fastForward(restMs)
  }

  async taps(): Promise<number> {
    return readTaps(this.page)
  }

  // Getting in

  async signIn({ email, password }: { readonly email: string; readonly password: string }): Promise<void> {
    await this.page.goto('/sign-in')
    await this.writeIn('E-mail', email)
    await this.writeIn('Password', password)
    await this.pressNamed('Sign in')
    await this.sees('Bench')
  }

  /** Opens the bench, on a device that is signed in. */
  async comesToTheBench(): Promise<void> {
    await this.page.goto('/')
    await this.page.getByRole('heading', { level: 1, name: 'Bench' }).waitFor()
  }

  /** Loads the page again, as a browser does after a crash. */
  async reloads(): Promise<void> {
    await this.page.reload()
    this.#lastTitle = ''
  }

  /** The page's heading after a load: the browser itself starts at the top, so the focus stays where it puts it. */
  async findsAgain(heading: string | RegExp): Promise<void> {
    await this.page.getByRole('heading', { level: 1, name: toHeading(heading) }).waitFor()
  }

  // The bench

  async searchSymptom(words: string): Promise<void> {
    await this.write(this.page.getByRole('searchbox', { name: 'What does it do?' }), words)
  }

  /** From the bench: the symptom, then Start, with other answers on the start page only where they are given. */
  async startWalk(symptom: string, machine: { readonly kind?: string; readonly engine?: string; readonly model?: string } = {}): Promise<void> {
    await this.press(this.page.getByRole('link', { name: toPattern(symptom) }))
    await this.sees('Start a walk')
    await this.page.getByRole('group', { name: 'Machine' }).waitFor()
    if (machine.kind !== undefined) await this.choose(machine.kind)
    if (machine.engine !== undefined) await this.choose(machine.engine)
    if (machine.model !== undefined) await this.pick(this.page.getByRole('combobox', { name: /Model/ }), machine.model)
    await this.pressNamed('Start')
    await this.page.waitForURL(/\/walks\//)
  }

  /** From the bench back into the open walk whose row says this: the one last touched, where several do. */
  async goesOnWith(words: string): Promise<void> {
    const row = this.page.getByRole('listitem').filter({ hasText: words }).first()
    await this.press(row.getByRole('link', { name: /^Go on/ }))
  }

  /** One of several radio buttons: tapped, or gone to by the arrow keys. */
  async choose(name: string): Promise<void> {
    const radio = this.page.getByRole('radio', { name, exact: true })
    if (this.hands.by === 'touch') return radio.tap()
    const group = this.page.getByRole('radio').and(this.page.locator(`[name="${(await radio.getAttribute('name')) ?? ''}"]`))
    await this.reach(group.and(this.page.locator(':checked')))
    for (let at = 0; at < (await group.count()); at += 1) {
      if (await radio.isChecked()) return
      await this.page.keyboard.press('ArrowDown')
    }
  }

  /** An entry of a list that the browser itself draws: picked, or found by its first letters. */
  async pick(list: Locator, entry: string): Promise<void> {
    if (this.hands.by === 'touch') await list.selectOption({ label: entry })
    else {
      await this.reach(list)
      await this.page.keyboard.type(entry)
    }
    await expect.poll(() => list.locator('option:checked').textContent()).toBe(entry)
  }

  // The walk player

  /** The page whose heading this is: the focus stands on it, and the tab says another name than before. */
  async sees(heading: string | RegExp): Promise<void> {
    await this.page.getByRole('heading', { level: 1, name: toHeading(heading) }).and(this.page.locator(':focus')).waitFor()
    const title = await this.page.title()
    expect(title, 'the name of the tab changes with the page').not.toBe(this.#lastTitle)
    this.#lastTitle = title
    await this.device.look(title)
  }

  async seesWords(words: string | RegExp): Promise<void> {
    await this.page.getByText(words).first().waitFor()
  }

  /** A caution page with these hazards on it is read; one tap for all of them. */
  async acknowledge(...hazards: readonly string[]): Promise<void> {
    await this.sees(/read before you go on/)
    for (const hazard of hazards) await this.seesWords(hazard)
    await this.pressNamed('Read it')
  }

  /** The page whose heading this is, with the cautions before it read if any stand there: for stories that are about something else. */
  async comesTo(heading: string | RegExp): Promise<void> {
    const caution = this.page.getByRole('heading', { level: 1, name: /read before you go on/ })
    await caution.or(this.page.getByRole('heading', { level: 1, name: toHeading(heading) })).and(this.page.locator(':focus')).waitFor()
    if (await caution.isVisible()) await this.acknowledge()
    await this.sees(heading)
  }

  /** The button of an outcome or act, by its words. */
  outcome(title: string): Locator {
    return this.page.locator('main').getByRole('button', { name: toPattern(title, '^\\d?\\s*') })
  }

  /** Answers the check on the page: a tap on the outcome, or the key of its balloon. */
  async answer(title: string): Promise<void> {
    const button = this.outcome(title)
    await button.waitFor()
    await this.rest()
    if (this.hands.by === 'touch') return button.tap()
    const numeral = /^\d/.exec((await button.textContent()) ?? '')?.[0]
    // While a field has the focus a digit is a digit.
    const isWriting = (await this.page.locator('input:focus, textarea:focus, select:focus').count()) > 0
    if (numeral === undefined || isWriting) await this.press(button)
    else await this.page.keyboard.press(numeral)
  }

  /** The field of the reading on the page. */
  get value(): Locator {
    return this.page.locator('main form input[inputmode="none"]')
  }

  /** Types a value without recording it: on the page's own pad, or after R on the keyboard. */
  async typeValue(text: string): Promise<void> {
    await this.value.waitFor()
    if (this.hands.by === 'keys') {
      // After a first try the field has the focus still.
      if ((await this.value.and(this.page.locator(':focus')).count()) === 0) await this.page.keyboard.press('r')
      await this.page.keyboard.type(text)
      return
    }
    const pad = this.page.getByRole('group', { name: 'Number pad' })
    for (const digit of text) await pad.getByRole('button', { name: digit === '.' ? 'decimal point' : digit, exact: true }).tap()
  }

  /** Types a value and records it, as a try or for good. */
  async readValue(text: string): Promise<void> {
    await this.typeValue(text)
    const record = this.page.locator('main').getByRole('button', { name: /\b(Record|Take)\s\d/ })
    await record.waitFor()
    await this.rest()
    if (this.hands.by === 'touch') await record.tap()
    else await this.page.keyboard.press('Enter')
  }

  /** The page with this question, answered. */
  async check(question: string | RegExp, outcome: string): Promise<void> {
    await this.comesTo(question)
    await this.answer(outcome)
  }

  /** The page with this question, answered with what the instrument shows: the tries one after the other. */
  async reading(question: string | RegExp, ...values: readonly string[]): Promise<void> {
    await this.comesTo(question)
    for (const value of values) await this.readValue(value)
  }

  /** A step with a page of its own is done. */
  async done(step: string): Promise<void> {
    await this.comesTo(step)
    await this.pressNamed('Done')
  }

  /** Leaves the check unanswered, with the reason. */
  async givesNoAnswer(why: 'Not sure' | 'Can’t do this' | 'Could not reproduce'): Promise<void> {
    await this.press(this.page.getByRole('button', { name: /No answer/ }))
    await this.answer(why)
  }

  /** Ticks an item of a list off; one with a reading is asked for its value. */
  async tick(item: string | RegExp): Promise<void> {
    await this.press(this.page.getByRole('checkbox', { name: item }))
  }

  /** Ticks the whole hand-back run off, with the value that it asks for. Answers the number of its items. */
  async tickRun(fullSpeed: string): Promise<number> {
    await this.findsAgain('Run it, tick each thing off')
    const items = this.page.locator('main ul').first().getByRole('checkbox')
    const count = await items.count()
    for (let at = 0; at < count; at += 1) {
      const item = items.nth(at)
      await this.press(item)
      if (await this.value.isVisible()) await this.readValue(fullSpeed)
      await expect.poll(() => item.isChecked()).toBe(true)
    }
    return count
  }

  /** An item of the hand-back run that is not as it should be. */
  async failInRun(item: string): Promise<void> {
    const row = this.page.locator('main').getByRole('listitem').filter({ hasText: item })
    await this.press(row.getByRole('button', { name: 'Not OK' }))
    await this.pressNamed('Failed')
  }

  async goesBack(): Promise<void> {
    if (this.hands.by === 'touch') return this.pressNamed('Back')
    await this.rest()
    await this.page.keyboard.press('Backspace')
  }

  /** Opens a page beside the check: from the foot of the page, or from what stands under More. */
  async opens(panel: 'Note' | 'Ask the lead' | 'More' | { readonly more: string }): Promise<void> {
    if (typeof panel === 'string') return this.press(this.page.getByRole('navigation', { name: 'Beside the check' }).getByRole('button', { name: panel }))
    await this.opens('More')
    await this.press(this.page.locator('main').getByRole('button', { name: panel.more }))
  }

  async isSaved(): Promise<void> {
    await this.page.locator('footer').getByText('saved', { exact: true }).waitFor()
  }

  async leaves(): Promise<void> {
    await this.device.close()
  }
}

async function isBox(target: Locator): Promise<boolean> {
  return target.evaluate((element) => element instanceof HTMLInputElement && ['checkbox', 'radio'].includes(element.type))
}

function toHeading(heading: string | RegExp): RegExp {
  return typeof heading === 'string' ? toPattern(heading, '^') : heading
}

/** Words as they stand on the screen, with either apostrophe. */
function toPattern(words: string, lead = ''): RegExp {
  return new RegExp(`${lead}${words.replace(/[.*+?^${}()|[\]\\]/g, '\\$&').replace(/[’']/g, '[’\']')}`)
}
