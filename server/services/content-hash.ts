import { createHash } from 'node:crypto'

/** Names a JSON value by what it says: two that differ only in the order of their fields have one hash. */
export function hashContent(value: unknown): string {
  return createHash('sha256').update(toCanonicalJson(value)).digest('base64url')
}

function toCanonicalJson(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(toCanonicalJson).join(',')}]`
  if (typeof value !== 'object' || value === null) return JSON.stringify(value)
  const fields = Object.entries(value)
    .filter(([, inner]) => inner !== undefined)
    .sort(([one], [other]) => (one < other ? -1 : 1))
  return `{${fields.map(([key, inner]) => `${JSON.stringify(key)}:${toCanonicalJson(inner)}`).join(',')}}`
}
