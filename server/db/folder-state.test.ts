import { cp, mkdir, mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'

import { afterEach, beforeEach, describe, expect, test } from 'vitest'

import { engineMajor, inspectFolder } from './folder-state.ts'

let folder: string
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'pullcord-state-'))
})
afterEach(() => rm(folder, { recursive: true }))

async function makeWhole(parts: Readonly<Record<string, string>> = {}): Promise<string> {
  const database = join(folder, 'database')
  await mkdir(join(database, 'base'), { recursive: true })
  await mkdir(join(database, 'global'))
  const files = { PG_VERSION: `${engineMajor}\n`, 'global/pg_control': 'control', ...parts }
  for (const [name, content] of Object.entries(files)) await writeFile(join(database, name), content)
  return database
}

/** The refusal's words, once it is sure that nothing in the folder has changed. */
async function refusalOf(): Promise<string> {
  const copy = `${folder}-copy`
  await cp(folder, copy, { recursive: true })
  const words = await inspectFolder(folder).then(
    () => 'taken',
    (error: unknown) => (error instanceof Error ? `${error.name}: ${error.message}` : 'not an error'),
  )
  const names = (await readdir(copy, { recursive: true })).sort()
  expect((await readdir(folder, { recursive: true })).sort()).toEqual(names)
  for (const name of names) {
    const before = await readFile(join(copy, name)).catch(() => null)
    expect(await readFile(join(folder, name)).catch(() => null)).toEqual(before)
  }
  await rm(copy, { recursive: true })
  return words
}

describe('the data folder', () => {
  test('an empty one, one with an empty database in it and a whole one are taken', async () => {
    expect(await inspectFolder(folder)).toBe(join(folder, 'database'))
    await mkdir(join(folder, 'database'))
    expect(await inspectFolder(folder)).toBe(join(folder, 'database'))
    await makeWhole()
    expect(await inspectFolder(folder)).toBe(join(folder, 'database'))
  })

  test.each(['17', '19', '9.6'])('a database of PostgreSQL %s is refused with the way out', async (version) => {
    await makeWhole({ PG_VERSION: `${version}\n` })
    expect(await refusalOf()).toMatch(new RegExp(`^StartRefusal: .* is of PostgreSQL ${version}, and this version of Pullcord reads PostgreSQL ${engineMajor}.*the version of Pullcord that made it`))
  })

  test.each(['PG_VERSION', 'base', 'global/pg_control'])('a database without %s is refused and never made anew over', async (part) => {
    const database = await makeWhole()
    await rm(join(database, part), { recursive: true })
    expect(await refusalOf()).toMatch(new RegExp(`^StartRefusal: .*is not whole: ${part} is missing.*move it away`))
  })

  test('a database with one stray file is half-made as well', async () => {
    await mkdir(join(folder, 'database'))
    await writeFile(join(folder, 'database', 'postgresql.conf'), '')
    expect(await refusalOf()).toContain('PG_VERSION, base, global/pg_control are missing')
  })

  test('the folder of a PostgreSQL server itself is refused, of whatever version', async () => {
    await writeFile(join(folder, 'PG_VERSION'), '15\n')
    expect(await refusalOf()).toMatch(/^StartRefusal: .*is itself the database folder of a PostgreSQL server.*DATABASE_URL/)
  })

  test('a file in the database\'s place is refused', async () => {
    await writeFile(join(folder, 'database'), '')
    expect(await refusalOf()).toMatch(/^StartRefusal: .*is not a folder/)
  })
})
