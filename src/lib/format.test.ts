import { expect, test } from 'vitest'

import { formatMinutes, formatSeconds, formatSince } from './format.ts'

test('minutes are whole, and a short moment is not said to be none', () => {
  expect([0, 0.2, 0.6, 12, 12.4].map(formatMinutes)).toEqual(['0\u00a0min', 'under 1\u00a0min', '1\u00a0min', '12\u00a0min', '12\u00a0min'])
})

test('measured seconds are shown as a clock shows them', () => {
  expect([0, 9.6, 75, 3601, -3].map(formatSeconds)).toEqual(['0:00', '0:10', '1:15', '60:01', '0:00'])
})

test('a moment is said as one would say it: today, yesterday, the day, then the date', () => {
  const now = new Date(2026, 10, 30, 9, 0)
  const ago = (days: number): string => new Date(2026, 10, 30 - days, 8, 30).toISOString()
  expect(formatSince(ago(0), now)).toMatch(/^today /)
  expect(formatSince(ago(1), now)).toMatch(/^yesterday /)
  expect(formatSince(ago(3), now)).toBe('Friday')
  expect(formatSince(ago(30), now)).toMatch(/2026/)
})
