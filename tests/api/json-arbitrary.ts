import * as fc from 'fast-check'

type Json = { readonly [key: string]: unknown }

/** Values that no schema expects where they turn up. */
export const oddValues: fc.Arbitrary<unknown> = fc.oneof(
  fc.constantFrom(
    null,
    true,
    0,
    -1,
    1e308,
    0.1,
    '',
    ' ',
    '\0',
    '\ud800',
    '../../etc/passwd',
    "'; drop table people; --",
    '<script>alert(1)</script>',
    '1,275',
    '２８００',
    '2 800',
    'NaN',
    {},
    [],
    [[]],
    [null],
    { $gt: '' },
    { constructor: 1 },
  ),
  fc.string({ unit: 'binary', maxLength: 40 }),
  fc.double(),
  fc.string({ minLength: 3000, maxLength: 3000 }),
  fc.jsonValue({ maxDepth: 3 }),
)

/** Values that a JSON Schema of the API's own document allows, as far as its forms go; patterns and formats are met by example. */
export function fromSchema(schema: Json, components: Json, depth = 0): fc.Arbitrary<unknown> {
  const inner = (json: unknown) => fromSchema(json as Json, components, depth + 1)
  if (typeof schema['$ref'] === 'string') return inner(components[schema['$ref'].split('/').at(-1) ?? ''])
  if ('const' in schema) return fc.constant(schema['const'])
  if (Array.isArray(schema['enum'])) return fc.constantFrom(...(schema['enum'] as unknown[]))
  for (const union of ['anyOf', 'oneOf'] as const) {
    if (Array.isArray(schema[union])) return fc.oneof(...schema[union].map(inner))
  }
  switch (schema['type']) {
    case 'object':
      return objectOf(schema, inner, depth)
    case 'array':
      return fc.array(inner(schema['items'] ?? {}), {
        minLength: Number(schema['minItems'] ?? 0),
        maxLength: Math.max(Number(schema['minItems'] ?? 0), depth > 4 ? 1 : 3),
      })
    case 'string':
      return textOf(schema)
    case 'integer':
      return fc.integer({ min: Number(schema['minimum'] ?? -1000), max: Math.min(Number(schema['maximum'] ?? 1000), 1e9) })
    case 'number':
      return fc.double({ noNaN: true, noDefaultInfinity: true, min: Number(schema['minimum'] ?? -1e6), max: Math.min(Number(schema['maximum'] ?? 1e6), 1e9) })
    case 'boolean':
      return fc.boolean()
    default:
      return fc.jsonValue({ maxDepth: 2 })
  }
}

function objectOf(schema: Json, inner: (json: unknown) => fc.Arbitrary<unknown>, depth: number): fc.Arbitrary<unknown> {
  const properties = (schema['properties'] ?? {}) as Json
  if (Object.keys(properties).length === 0 && typeof schema['additionalProperties'] === 'object') {
    return fc.dictionary(fc.constantFrom('saw', 'fullSpeed', 'n1'), inner(schema['additionalProperties']), { maxKeys: 2 })
  }
  const required = new Set((schema['required'] ?? []) as string[])
  const fields = Object.entries(properties).filter(([name]) => required.has(name) || depth < 5)
  return fc.record(Object.fromEntries(fields.map(([name, json]) => [name, inner(json)])), {
    requiredKeys: fields.map(([name]) => name).filter((name) => required.has(name)),
  })
}

function textOf(schema: Json): fc.Arbitrary<string> {
  if (schema['format'] === 'uuid') return fc.oneof(fc.uuid(), fc.constant('01900000-0000-7000-8000-000000000001'))
  if (schema['format'] === 'date-time') return fc.constantFrom('2026-03-02T09:00:00Z', '0000-01-01T00:00:00Z', '9999-12-31T23:59:59.999999Z')
  if (schema['format'] === 'email') return fc.constantFrom('jun.okoro@fernhill.example', 'x@y.example')
  if (String(schema['pattern'] ?? '').includes('\\/')) return fc.constantFrom('saw/n1', 'saw/nowhere')
  if (schema['pattern'] !== undefined) return fc.constantFrom('saw', 's', 'n1', 'yes', 'filter-packed')
  return fc.string({ unit: 'grapheme', minLength: Number(schema['minLength'] ?? 0), maxLength: Math.min(Number(schema['maxLength'] ?? 60), 60) })
}

/** A JSON value with one part of it replaced, added or taken out. */
export function spoiled(valid: fc.Arbitrary<unknown>): fc.Arbitrary<unknown> {
  return fc.tuple(valid, oddValues, fc.nat(), fc.constantFrom('replace', 'add', 'remove')).map(([value, odd, pick, how]) => {
    const copy = structuredClone(value)
    const holders = listHolders(copy)
    const holder = holders[pick % Math.max(1, holders.length)]
    if (holder === undefined) return odd
    const keys = Object.keys(holder)
    const key = how === 'add' || keys.length === 0 ? 'field' : (keys[pick % keys.length] ?? 'field')
    if (how === 'remove') Reflect.deleteProperty(holder, key)
    else Reflect.set(holder, key, odd)
    return copy
  })
}

function listHolders(value: unknown): object[] {
  if (typeof value !== 'object' || value === null) return []
  return [value, ...Object.values(value).flatMap(listHolders)]
}
