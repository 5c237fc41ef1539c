/** Equipment classes, in the order in which the bench offers them. */
export const equipmentClasses = [
  'chain-saw',
  'line-trimmer',
  'brush-cutter',
  'hedge-trimmer',
  'leaf-blower',
  'water-pump',
  'cut-off-saw',
  'mower',
  'tiller',
  'generator',
  'other',
] as const
/** One of the closed list of equipment classes. */
export type EquipmentClass = (typeof equipmentClasses)[number]

/** Kinds of engine. */
export const engineKinds = ['two-stroke', 'four-stroke'] as const
/** One of the closed list of engine kinds. */
export type EngineKind = (typeof engineKinds)[number]

/** What the bench reads for a class. */
export const equipmentClassWords: Readonly<Record<EquipmentClass, string>> = {
  'chain-saw': 'Chain saw',
  'line-trimmer': 'Line trimmer',
  'brush-cutter': 'Brush cutter',
  'hedge-trimmer': 'Hedge trimmer',
  'leaf-blower': 'Leaf blower',
  'water-pump': 'Water pump',
  'cut-off-saw': 'Cut-off saw',
  mower: 'Mower',
  tiller: 'Tiller',
  generator: 'Generator',
  other: 'Other machine',
}

/** What the bench reads for an engine kind. */
export const engineKindWords: Readonly<Record<EngineKind, string>> = { 'two-stroke': 'Two-stroke', 'four-stroke': 'Four-stroke' }
