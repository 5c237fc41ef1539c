import type { z } from 'zod'
import type { Fault } from '#shared/api/problem.ts'

/** Most faults that one answer names; a file that is wrong throughout is not helped by ten thousand. */
const maxFaults = 50
/** Deeper than any document of ours, and far from what a stack can bear. */
const maxDepth = 64

const kinds: Readonly<Record<string, string>> = {
  string: 'text',
  number: 'a number',
  int: 'a whole number',
  boolean: 'true or false',
  array: 'a list',
  object: 'a group of fields',
  record: 'a group of fields',
}
const formats: Readonly<Record<string, string>> = {
  uuid: 'This has to be an id (UUID).',
  datetime: 'Write a moment in UTC, like 2026-01-31T09:30:00Z.',
  email: 'Write an e-mail address, like name@shop.example.',
  regex: 'This has characters that do not belong here.',
}

function sizeWords(issue: z.core.$ZodRawIssue, bound: 'least' | 'most'): string {
  const limit = String(bound === 'least' ? issue['minimum'] : issue['maximum'])
  const what = issue['origin'] === 'string' ? ' characters' : issue['origin'] === 'array' ? ' entries' : ''
  return `At ${bound} ${limit}${what}.`
}

/** Words for a fault that its schema has no words for. */
function toWords(issue: z.core.$ZodRawIssue): string {
  switch (issue.code) {
    case 'invalid_type':
      return issue.input === undefined ? 'This is missing.' : `This has to be ${kinds[String(issue['expected'])] ?? 'something else'}.`
    case 'invalid_value':
      return `Choose one of: ${(issue['values'] as unknown[]).map(String).join(', ')}.`
    case 'unrecognized_keys':
      return 'There is no such field here: take it out.'
    case 'invalid_format':
      return formats[String(issue['format'])] ?? 'This is not written as it has to be.'
    case 'too_small':
      return sizeWords(issue, 'least')
    case 'too_big':
      return sizeWords(issue, 'most')
    case 'invalid_union':
      return issue['discriminator'] === undefined ? 'This fits none of the forms that it may have.' : 'There is no such kind.'
    default:
      return 'This is not written as it has to be.'
  }
}

/** A path as a JSON pointer in a URI fragment (RFC 6901, section 6). */
export function toPointer(path: readonly PropertyKey[]): string {
  return ['#', ...path.map((part) => encodeURIComponent(String(part).replaceAll('~', '~0').replaceAll('/', '~1')))].join('/')
}

function toFaults(issues: readonly z.core.$ZodIssue[], base: readonly PropertyKey[]): Fault[] {
  return issues
    .flatMap((issue) =>
      issue.code === 'unrecognized_keys'
        ? issue.keys.map((key) => ({ pointer: toPointer([...base, ...issue.path, key]), detail: issue.message }))
        : [{ pointer: toPointer([...base, ...issue.path]), detail: issue.message }],
    )
    .slice(0, maxFaults)
}

/** Reads an input by its schema; `base` goes before every pointer. */
export function readInput<T extends z.ZodType>(schema: T, value: unknown, base: readonly PropertyKey[] = []): { data: z.output<T> } | { faults: Fault[] } {
  const unstorable = findUnstorable(value, base)
  if (unstorable !== null) return { faults: [unstorable] }
  const result = schema.safeParse(value, { error: toWords })
  return result.success ? { data: result.data } : { faults: toFaults(result.error.issues, base) }
}

/** The first text that no database column can hold (a zero character, half a surrogate pair), or a nesting that nothing of ours has. */
function findUnstorable(value: unknown, base: readonly PropertyKey[]): Fault | null {
  const open: { value: unknown; path: readonly PropertyKey[] }[] = [{ value, path: base }]
  for (let next = open.pop(); next !== undefined; next = open.pop()) {
    const { value: here, path } = next
    if (typeof here === 'string' && !isStorable(here)) return { pointer: toPointer(path), detail: 'This holds a character that cannot be kept: type it again.' }
    if (typeof here !== 'object' || here === null) continue
    if (path.length - base.length >= maxDepth) return { pointer: toPointer(path.slice(0, base.length + 1)), detail: 'This is nested too deeply.' }
    for (const [key, inner] of Object.entries(here)) {
      if (!isStorable(key)) return { pointer: toPointer(path), detail: 'A field name holds a character that cannot be kept.' }
      if (typeof inner === 'string' || typeof inner === 'object') open.push({ value: inner, path: [...path, key] })
    }
  }
  return null
}

function isStorable(text: string): boolean {
  return !/[\0\p{Surrogate}]/u.test(text)
}
