import type { z } from 'zod'

/** One fault of a document: where it is (a JSON pointer written as a fragment, RFC 6901) and what is wrong, in words. */
export type FieldProblem = { readonly pointer: string; readonly detail: string }

type Issue = z.core.$ZodIssue

/** Says a schema's complaint in plain words that name the field, and the node or entry that holds it. */
export function toFieldProblem(issue: Issue, json: unknown): FieldProblem {
  const path = [...issue.path, ...(issue.code === 'unrecognized_keys' ? issue.keys.slice(0, 1) : [])]
  const holder = holderWords(path, json)
  const detail = `${holder}${toWords(issue, issue.path, json)}`
  return { pointer: toPointer(path), detail: detail.charAt(0).toUpperCase() + detail.slice(1) }
}

/** A JSON pointer as a URI fragment; `~` and `/` inside a name are escaped (RFC 6901, section 3). */
export function toPointer(path: readonly PropertyKey[]): string {
  return ['#', ...path.map((part) => String(part).replaceAll('~', '~0').replaceAll('/', '~1'))].join('/')
}

function toWords(issue: Issue, path: readonly PropertyKey[], json: unknown): string {
  const field = fieldName(path)
  switch (issue.code) {
    case 'invalid_type':
      return valueAt(json, path) === undefined ? `${field} is missing.` : `${field} must be ${kindWords(issue.expected)}.`
    case 'invalid_value':
      return `${field} must be ${oneOf(issue.values)}.`
    case 'invalid_union':
      return unionWords(issue, field, json, path)
    case 'unrecognized_keys':
      return `${issue.keys
        .slice(0, 5)
        .map((key) => `"${shorten(key)}"`)
        .join(', ')} ${issue.keys.length === 1 ? 'is not a field' : 'are not fields'} here.`
    case 'too_big':
      return `${field} is too ${issue.origin === 'string' ? 'long' : 'large'}: at most ${issue.maximum}${countedIn(issue.origin)}.`
    case 'too_small':
      return `${field} is too ${issue.origin === 'string' ? 'short' : 'small'}: at least ${issue.minimum}${countedIn(issue.origin)}.`
    case 'invalid_key':
      return `${field} is no name that can stand here: ${issue.issues[0]?.message ?? 'it is not on the list.'}`
    default:
      return `${field}: ${issue.message}`
  }
}

function unionWords(issue: Extract<Issue, { code: 'invalid_union' }>, field: string, json: unknown, path: readonly PropertyKey[]): string {
  if (path.at(-1) === 'kind') return `${field} is no kind of node${quoted(valueAt(json, path))}.`
  if (path.at(-1) === 'limits') return `${field} must be a spec key ({"spec": …}), numbers ({"min": …, "max": …}) or figures as printed ({"as": […]}).`
  const first = issue.errors[0]?.[0]
  return first === undefined ? `${field} has none of the forms that it may have.` : toWords(first, [...path, ...first.path], json)
}

/** "Node n5: " where the fault lies inside something that has an id of its own. */
function holderWords(path: readonly PropertyKey[], json: unknown): string {
  for (let length = path.length - 1; length >= 2; length -= 1) {
    const key = path[length - 1]
    const kind = singular[String(path[length - 2])]
    if (kind === undefined) continue
    const id = typeof key === 'number' ? valueAt(json, [...path.slice(0, length), 'id']) : key
    const outer = holderWords(path.slice(0, length - 1), json)
    return `${outer}${kind} ${typeof id === 'string' && id !== '' ? shorten(id) : Number(key) + 1}: `
  }
  return ''
}

const singular: Readonly<Record<string, string>> = {
  nodes: 'node',
  positions: 'position of node',
  edges: 'edge',
  outcomes: 'outcome',
  bands: 'band',
  cautions: 'caution',
  access: 'access',
  causes: 'cause',
  serviceItems: 'service item',
  specKeys: 'spec key',
  parts: 'part',
}

function fieldName(path: readonly PropertyKey[]): string {
  const last = path.at(-1)
  if (last === undefined) return 'The chart'
  if (typeof last !== 'number') return `"${shorten(String(last))}"`
  return `${singular[String(path.at(-2))] ?? `"${String(path.at(-2) ?? '')}", entry`} ${last + 1}`
}

function valueAt(json: unknown, path: readonly PropertyKey[]): unknown {
  return path.reduce<unknown>(
    (at, part) => (typeof at === 'object' && at !== null && Object.hasOwn(at, part) ? (at as Record<PropertyKey, unknown>)[part] : undefined),
    json,
  )
}

function kindWords(expected: string): string {
  const words: Readonly<Record<string, string>> = {
    string: 'text',
    number: 'a number',
    int: 'a whole number',
    boolean: 'true or false',
    array: 'a list',
    object: 'an object',
    record: 'an object',
  }
  return words[expected] ?? expected
}

function oneOf(values: readonly unknown[]): string {
  const list = values.map((value) => JSON.stringify(value))
  return list.length === 1 ? (list[0] ?? '') : `one of ${list.join(', ')}`
}

function countedIn(origin: string): string {
  return origin === 'string' ? ' characters' : origin === 'array' || origin === 'set' ? ' entries' : ''
}

function quoted(value: unknown): string {
  return typeof value === 'string' ? `: "${shorten(value)}"` : ''
}

function shorten(text: string): string {
  return text.length > 40 ? `${text.slice(0, 40)}…` : text
}
