import type { Technician } from './technician.ts'

/** The saw of these stories, and what its spec sheet says of full speed: 11 800 to 13 000 rpm. */
export const saw = { model: 'Orrinvale 50 cc chain saw' } as const

/** From the first page of "won't reach full speed" to the question about plates: it stays steady below full, and the reading says so twice. */
export async function readLowTwice(technician: Technician): Promise<void> {
  await technician.acknowledge('Exhaust gas kills', 'Chain, blade or fan can move as the engine starts')
  await technician.check('What does it do when you open it up?', 'Steady, below full')
  await technician.reading('What full speed does it reach without load?', '9850', '9840')
}

/** On to the plug, with nothing wrong but what `filter` says. */
export async function comeToThePlug(technician: Technician, filter: 'Light shows' | 'Dusty, light shows'): Promise<void> {
  await technician.check('Do choke and throttle plates open all the way?', 'Both fully open')
  await technician.check('Does the drive turn freely by hand?', 'Turns freely')
  await technician.check('Does light come through the air filter?', filter)
  await technician.check('What does the fuel sample look like?', 'Fresh, one layer')
  await technician.check('What does the muffler outlet show?', 'Dry, grey')
  await technician.check('Does light show through the whole screen?', 'Light in every opening')
}

/** The ten checks from full speed missing to a proven, fouled plug; the walk began with the saw's own spec sheet. */
export async function proveThePlug(technician: Technician): Promise<void> {
  await readLowTwice(technician)
  await comeToThePlug(technician, 'Light shows')
  await technician.check('What does the plug look like?', 'Black, oily or wet')
  await technician.reading('Is full speed back with a good plug?', '12300')
  await technician.sees('Plug fouled')
}
