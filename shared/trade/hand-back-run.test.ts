import { expect, test } from 'vitest'
import { equipmentClasses } from './equipment.ts'
import { handBackRun } from './hand-back-run.ts'

const ids = (name: (typeof equipmentClasses)[number]): string[] => handBackRun(name).map(({ id }) => id)

test('a saw is handed back only with a chain that stands still at idle, a brake that stops it and its guards in place', () => {
  expect(ids('chain-saw')).toEqual([
    'trigger-returns',
    'starts-easily',
    'stop-switch-stops',
    'chain-still-at-idle',
    'same-idle-on-all-sides',
    'brake-stops-chain',
    'full-speed',
    'oil-off-the-nose',
    'no-fuel-or-oil-leak',
    'saw-guards-in-place',
  ])
})

test('a trimmer, a blower and a pump have items of their own', () => {
  expect(ids('line-trimmer')).toEqual(expect.arrayContaining(['head-still-at-idle', 'guard-and-line-cutter', 'harness-hook']))
  expect(ids('leaf-blower')).toEqual(expect.arrayContaining(['tubes-lock', 'fan-screen-on']))
  expect(ids('water-pump')).toEqual(expect.arrayContaining(['enough-at-pump-end', 'seal-dry', 'starts-easily', 'stop-switch-stops', 'pump-controls-work']))
})

test('every class has a run, no id stands twice in one, and a full-speed reading has its key and unit', () => {
  for (const name of equipmentClasses) {
    const list = handBackRun(name)
    expect(list.length).toBeGreaterThanOrEqual(4)
    expect(new Set(list.map(({ id }) => id)).size).toBe(list.length)
    for (const { id, title } of list) {
      expect(id).toMatch(/^[a-z]+(-[a-z]+)*$/)
      expect(title.split(' ').length).toBeLessThanOrEqual(7)
    }
    for (const { reading } of list) if (reading) expect(reading).toEqual({ specKey: 'fullSpeed', quantity: 'rotational-speed', unit: '1/min' })
  }
})
