/** The pages are in English; of its spellings of dates the browser's own is taken, else the one that cannot be misread. */
const locale = globalThis.navigator?.languages.find((language) => language.startsWith('en')) ?? 'en-GB'

const noBreak = '\u00a0'
const day = new Intl.DateTimeFormat(locale, { dateStyle: 'medium' })
const moment = new Intl.DateTimeFormat(locale, { dateStyle: 'medium', timeStyle: 'short' })
const clock = new Intl.DateTimeFormat(locale, { timeStyle: 'short' })
const weekday = new Intl.DateTimeFormat(locale, { weekday: 'long' })

/** Whole bench minutes: '12 min'. Less than a half is still said to be under one. */
export function formatMinutes(minutes: number): string {
  return minutes > 0 && minutes < 0.5 ? `under 1${noBreak}min` : `${Math.round(minutes)}${noBreak}min`
}

/** Measured seconds as a clock shows them: 75 -> '1:15'. */
export function formatSeconds(seconds: number): string {
  const whole = Math.max(0, Math.round(seconds))
  return `${Math.floor(whole / 60)}:${String(whole % 60).padStart(2, '0')}`
}

export function formatDay(iso: string): string {
  return day.format(new Date(iso))
}

export function formatMoment(iso: string): string {
  return moment.format(new Date(iso))
}

export function formatClock(iso: string): string {
  return clock.format(new Date(iso))
}

/** 'today 09:12', 'yesterday 17:40', 'Tuesday', then the date. */
export function formatSince(iso: string, now: Date = new Date()): string {
  const then = new Date(iso)
  const days = Math.round((toMidnight(now) - toMidnight(then)) / 86_400_000)
  if (days === 0) return `today ${clock.format(then)}`
  if (days === 1) return `yesterday ${clock.format(then)}`
  return days > 1 && days < 7 ? weekday.format(then) : day.format(then)
}

function toMidnight(date: Date): number {
  return new Date(date.getFullYear(), date.getMonth(), date.getDate()).getTime()
}
