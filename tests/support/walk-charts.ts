import { ask, back, buildChart, cause, check, hold, jump, proof, reading, reproducing, start, step, type ChartSketch } from './chart-builder.ts'

/** A chart that has some of everything: reproduce, measure, look, prove by the same reading and by sight, repair; an unsafe cause and a hold. */
export const sawSketch: ChartSketch = {
  id: 'saw',
  title: 'No guts',
  causes: [
    { id: 'filter-packed', title: 'Filter packed', system: 'air', remedy: { text: 'Clean the filter', minutes: 5, parts: [{ title: 'Filter', quantity: 1 }] } },
    { id: 'drum-worn', title: 'Drum worn', system: 'drive-and-brake', unsafe: true },
    { id: 'never-cleaned', title: 'Never cleaned', system: 'use', contributing: true, advice: 'Blow it out each day' },
  ],
  access: [
    { id: 'warm', title: 'Warm', minutes: 3, excludes: ['lead-off'] },
    { id: 'top-off', title: 'Top cover off', minutes: 1, closeMinutes: 1 },
    { id: 'lead-off', title: 'Lead off', minutes: 0.5, closeMinutes: 0.5 },
    { id: 'cover-off', title: 'Clutch cover off', minutes: 2, closeMinutes: 2, needs: ['lead-off'] },
  ],
  serviceItems: [
    { id: 'clean-filter', title: 'Clean the filter', minutes: 4 },
    { id: 'grease', title: 'Grease the tip', minutes: 1 },
  ],
  nodes: [
    start(),
    reproducing('n1', { machine: 'running', needs: ['warm'], minutes: 2 }),
    reading('n2', {
      machine: 'running',
      needs: ['warm'],
      outcomes: [
        { id: 'low', title: 'Low' },
        { id: 'in', title: 'In limits', normal: true },
        { id: 'hunts', title: 'Never settles' },
      ],
    }),
    check('n3', [{ id: 'good', title: 'Light', normal: true }, { id: 'dusty', title: 'Dusty', serviceable: true, serviceItem: 'clean-filter' }, 'dark'], {
      machine: 'stopped',
      needs: ['top-off'],
    }),
    proof('p3', 'filter-packed', { machine: 'running', needs: ['warm'], compares: { node: 'n2', confirmsWhen: ['in'] }, minutes: 2 }),
    cause('c3', 'filter-packed'),
    check('n4', ['good', 'stripe'], { machine: 'stopped', needs: ['cover-off'] }),
    step('x4', { needs: ['cover-off'] }),
    proof('p4', 'drum-worn', { by: 'sight', minutes: 1 }),
    cause('c4', 'drum-worn'),
    check('n5', ['good', 'loose']),
    hold('h5', { causeId: 'drum-worn' }),
    ask(),
    ask('a0', { reason: 'could-not-reproduce' }),
  ],
  edges: [
    's > n1',
    'n1.yes > n2',
    'n1.no > a0',
    'n2.low > n3',
    'n2.in > n4',
    'n2.hunts > n4',
    'n3.good > n4',
    'n3.dusty > n4',
    'n3.dark > p3',
    'p3.gone > c3',
    'p3.still > n4',
    'n4.good > n5',
    'n4.stripe > x4',
    'x4 > p4',
    'p4.gone > c4',
    'p4.still > n5',
    'n5.good > ask',
    'n5.loose > h5',
  ],
  more: { contributing: ['never-cleaned'] },
}
export const sawChart = buildChart(sawSketch)

/** Jumps of every kind: one that returns, one that does not, one into a chart that is not there, one that lets the person pick. */
export const jumpingChart = buildChart({
  id: 'saw',
  nodes: [
    start(),
    reproducing(),
    check('n2', ['good', 'seal', 'away', 'missing', 'absent', 'else']),
    jump('j-seal', 'seal', { returns: true }),
    jump('j-away', 'other', { at: 'n7' }),
    jump('j-missing', 'nobody-wrote-it'),
    jump('j-absent', 'nobody-wrote-it', { returns: true }),
    { id: 'j-pick', kind: 'jump', title: 'What does it do?', pick: 'symptom' },
    check('n3', ['good', 'bad']),
    cause('c3', 'band-drags'),
    ask(),
    ask('a0', { reason: 'could-not-reproduce' }),
  ],
  edges: [
    's > n1',
    'n1.yes > n2',
    'n1.no > a0',
    'n2.good > n3',
    'n2.seal > j-seal',
    'n2.away > j-away',
    'n2.missing > j-missing',
    'n2.absent > j-absent',
    'n2.else > j-pick',
    'j-seal > n3',
    'j-absent > n3',
    'n3.good > ask',
    'n3.bad > c3',
  ],
})
/** Called by `jumpingChart`; calls nobody. */
export const sealChart = buildChart({
  id: 'seal',
  nodes: [start(), check('k1', ['tight', 'drop']), proof('q1', 'seal-leaks'), cause('d1', 'seal-leaks'), back()],
  edges: ['s > k1', 'k1.tight > back', 'k1.drop > q1', 'q1.gone > d1', 'q1.still > back'],
})
/** Where the one-way jump of `jumpingChart` leads; it jumps back one way, into the middle. */
export const otherChart = buildChart({
  id: 'other',
  nodes: [start(), reproducing('n6'), check('n7', ['good', 'bad', 'home']), cause('c7', 'other-cause'), jump('j-home', 'saw', { at: 'n3' }), ask()],
  edges: ['s > n6', 'n6.yes > n7', 'n6.no > ask', 'n7.good > ask', 'n7.bad > c7', 'n7.home > j-home'],
})
