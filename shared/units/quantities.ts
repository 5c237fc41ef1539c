/** Quantities that a reading can have, each with the units in which it may be given. */
export const unitsOfQuantity = {
  'rotational-speed': ['1/min'],
  length: ['mm', 'in'],
  pressure: ['kPa', 'bar', 'psi', 'inHg'],
  vacuum: ['kPa', 'bar', 'psi', 'inHg'],
  time: ['s'],
  volume: ['ml', 'l', 'US fl oz', 'US gal'],
  mass: ['g', 'kg', 'lb'],
  temperature: ['degC', 'degF'],
  torque: ['N m', 'ft-lbf'],
  voltage: ['V'],
  resistance: ['ohm'],
  ratio: ['ratio'],
  count: ['count'],
} as const

/** A quantity of the closed list. */
export type Quantity = keyof typeof unitsOfQuantity
/** All quantities. */
export const quantities = Object.keys(unitsOfQuantity) as Quantity[]

/** A unit of the closed list. */
export type Unit = (typeof unitsOfQuantity)[Quantity][number]
/** All units, each once. */
export const units: readonly Unit[] = [...new Set(Object.values(unitsOfQuantity).flat())]
