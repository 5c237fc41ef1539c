/** Systems of a machine that a cause belongs to; `use` is for contributing causes alone. */
export const systems = [
  'fuel',
  'air',
  'ignition',
  'compression',
  'exhaust',
  'drive-and-brake',
  'cutting-gear',
  'starter',
  'water-end',
  'controls',
  'electrical',
  'use',
] as const
/** One of the closed list of systems. */
export type System = (typeof systems)[number]

/** What the bench reads for a system. */
export const systemWords: Readonly<Record<System, string>> = {
  fuel: 'Fuel',
  air: 'Air',
  ignition: 'Ignition',
  compression: 'Compression',
  exhaust: 'Exhaust',
  'drive-and-brake': 'Drive and brake',
  'cutting-gear': 'Cutting gear',
  starter: 'Starter',
  'water-end': 'Water end',
  controls: 'Controls',
  electrical: 'Electrical',
  use: 'Use',
}
