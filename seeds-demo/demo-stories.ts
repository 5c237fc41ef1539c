import type { QuestionId } from '#shared/lib/ids.ts'
import type { Role } from '#shared/trade/roles.ts'
import type { Answers, Draft } from './bench-hand.ts'
import type { DemoPeople } from './demo-people.ts'

/** One walk of the demo shop: who walked which chart, what was found that was not as it should be, and where it stands. */
export interface DemoStory {
  readonly about: string
  readonly by: Role
  readonly chart: string
  readonly model: string
  readonly serial: string
  readonly hoursAgo: number
  readonly answers: Answers
  /** The node at whose page the walk stands; missing, it goes on to its end. */
  readonly stopsAt?: string
  /** What was done there. */
  readonly then?: (newQuestion: () => QuestionId, people: DemoPeople) => readonly Draft[]
}

const saw = 'orrinvale-50'
const trimmer = 'tolvane-26'
const reproduced = { n1: 'low', n2: 'low' }
const day = 24

const ask =
  (text: string) =>
  (newQuestion: () => QuestionId): readonly Draft[] => [{ type: 'asked', payload: { questionId: newQuestion(), text, photoIds: [] } }]
const note = (text: string): Draft => ({ type: 'note-added', payload: { text, photoIds: [] } })

/** The walks, oldest first. */
export const demoStories: readonly DemoStory[] = [
  {
    about: 'filter packed with dust',
    by: 'junior',
    chart: 'no-full-speed',
    model: saw,
    serial: 'OV50-11873',
    hoursAgo: 41 * day,
    answers: { ...reproduced, n5: 'none' },
  },
  {
    about: 'plug fouled',
    by: 'junior',
    chart: 'no-full-speed',
    model: saw,
    serial: 'OV50-10442',
    hoursAgo: 34 * day,
    answers: { ...reproduced, n5: 'dusty', n8: 'fouled' },
  },
  {
    about: 'choke half shut',
    by: 'lead',
    chart: 'no-full-speed',
    model: trimmer,
    serial: 'TV26-0093',
    hoursAgo: 30 * day,
    answers: { ...reproduced, n3: 'choke' },
  },
  {
    about: 'stale fuel',
    by: 'junior',
    chart: 'no-full-speed',
    model: trimmer,
    serial: 'TV26-0517',
    hoursAgo: 22 * day,
    answers: { ...reproduced, n6: 'sour' },
  },
  {
    about: 'screen furred up',
    by: 'junior',
    chart: 'no-full-speed',
    model: saw,
    serial: 'OV50-12009',
    hoursAgo: 19 * day,
    answers: { ...reproduced, n5: 'dusty', n6b: 'dry', n7: 'furred', n7b: 'furred' },
  },
  {
    about: 'water in the fuel, by the printed table',
    by: 'junior',
    chart: 'hard-to-start-printed',
    model: trimmer,
    serial: 'TV26-0220',
    hoursAgo: 15 * day,
    answers: { n7: 'water' },
  },
  {
    about: 'chain too tight',
    by: 'junior',
    chart: 'drag-at-clutch',
    model: saw,
    serial: 'OV50-10981',
    hoursAgo: 12 * day,
    answers: { n0: 'drags', n1: 'stiff', n2: 'tight' },
  },
  {
    about: 'chips under the band',
    by: 'junior',
    chart: 'no-full-speed',
    model: saw,
    serial: 'OV50-11340',
    hoursAgo: 8 * day,
    answers: { ...reproduced, n5: 'dusty', 'no-full-speed/n9': 'marks', 'drag-at-clutch/n9': 'low' },
  },
  {
    about: 'compression low, given up',
    by: 'lead',
    chart: 'no-full-speed',
    model: saw,
    serial: 'OV50-09215',
    hoursAgo: 6 * day,
    answers: { ...reproduced, n12: 'low' },
    stopsAt: 'n12b',
    then: () => [{ type: 'abandoned', payload: { why: 'The customer takes it back as it is: the saw is not worth new rings.' } }],
  },
  {
    about: 'nothing found, the lead is asked',
    by: 'junior',
    chart: 'hard-to-start-printed',
    model: trimmer,
    serial: 'TV26-0481',
    hoursAgo: 3 * day,
    answers: {},
    then: ask('All eight are as they should be and it still starts badly when hot. What now?'),
  },
  {
    about: 'at the bench since yesterday',
    by: 'junior',
    chart: 'no-full-speed',
    model: saw,
    serial: 'OV50-12377',
    hoursAgo: 20,
    answers: { ...reproduced, n5: 'dusty' },
    stopsAt: 'n8',
    then: () => [note('Customer says it was fine until the last tank.'), { type: 'paused', payload: { why: 'Waiting for a plug.' } }],
  },
  {
    about: 'the lead is asked about a stripe',
    by: 'junior',
    chart: 'drag-at-clutch',
    model: saw,
    serial: 'OV50-12401',
    hoursAgo: 3,
    answers: { n0: 'drags' },
    stopsAt: 'n7',
    then: ask('Is this thin line round the drum a rub stripe, or only the edge of the dirt?'),
  },
  {
    about: "on the lead's own bench",
    by: 'lead',
    chart: 'no-full-speed',
    model: trimmer,
    serial: 'TV26-0602',
    hoursAgo: 1,
    answers: reproduced,
    stopsAt: 'n6',
  },
]
