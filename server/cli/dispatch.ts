import { readFile } from 'node:fs/promises'
import { text } from 'node:stream/consumers'

import { StartRefusal } from '#server/lib/start-refusal.ts'
import { BadInput } from './verb.ts'
import type { Io, Verb, VerbTable } from './verb.ts'

/**
 * The groups of verbs, each loaded when it is asked for. `chart` and `walk` are pure: they open no data folder and need no
 * configuration. The verbs of the last group stand alone (`create-owner`) and go through the lock of the data folder.
 */
const groups: Readonly<Record<string, () => Promise<VerbTable>>> = {
  chart: async () => (await import('./chart.ts')).chartVerbs,
  walk: async () => (await import('./walk.ts')).walkVerbs,
}
const loadShopVerbs = async (): Promise<VerbTable> => (await import('./shop.ts')).shopVerbs

const processIo: Io = {
  read: async (file) => {
    if (file === '-') return text(process.stdin)
    try {
      return await readFile(file, 'utf8')
    } catch (error) {
      throw new BadInput(`${file} can't be read: ${error instanceof Error ? error.message : String(error)}`)
    }
  },
  note: (words) => process.stderr.write(`${words}\n`),
}

/** Runs one command line: JSON on stdout, messages on stderr; the exit status is 0, or 1 when something was refused or is in error. */
export async function runCommandLine(args: readonly string[], io: Io = processIo): Promise<number> {
  try {
    const found = await findVerb(args)
    if (found === null) {
      process.stdout.write(`${JSON.stringify({ usage: await listUsage() }, null, 2)}\n`)
      return 0
    }
    const answer = await found.verb.run(found.rest, io)
    process.stdout.write(answer.text ?? `${JSON.stringify(answer.json, null, 2)}\n`)
    return answer.failed === true ? 1 : 0
  } catch (error) {
    process.stderr.write(`${toOneLine(error)}\n`)
    return 1
  }
}

async function findVerb(args: readonly string[]): Promise<{ verb: Verb; rest: readonly string[] } | null> {
  const [first, second, ...rest] = args
  if (first === undefined || first === 'help' || first === '--help') return null
  const loadGroup = lookUp(groups, first)
  const shopVerb = loadGroup ? undefined : lookUp(await loadShopVerbs(), first)
  if (shopVerb) return { verb: shopVerb, rest: args.slice(1) }
  if (!loadGroup) throw new BadInput(`There is no command "${first}". Run it without a command to see them all.`)
  const table = await loadGroup()
  const verb = second === undefined ? undefined : lookUp(table, second)
  if (!verb) throw new BadInput(`"${first}" needs one of: ${Object.keys(table).join(', ')}.`)
  return { verb, rest }
}

function lookUp<T>(table: Readonly<Record<string, T>>, name: string): T | undefined {
  return Object.hasOwn(table, name) ? table[name] : undefined
}

async function listUsage(): Promise<string[]> {
  const lines = Object.entries(await loadShopVerbs()).map(([name, verb]) => toUsage(name, verb))
  for (const [group, load] of Object.entries(groups)) {
    for (const [name, verb] of Object.entries(await load())) lines.push(toUsage(`${group} ${name}`, verb))
  }
  return lines
}

function toUsage(name: string, verb: Verb): string {
  return `${name} ${verb.usage}`.trimEnd() + `: ${verb.does}`
}

function toOneLine(error: unknown): string {
  const isRefusal = error instanceof BadInput || error instanceof StartRefusal
  const words = isRefusal ? error.message : String(error)
  return words.replaceAll(/\s*[\r\n]+\s*/g, ' ')
}
