import { existsSync } from 'node:fs'

import { describe, expect, test } from 'vitest'

import { law, testPackages } from './law.ts'
import type { Row } from './law.ts'
import { isTest, readSources } from './sources.ts'
import type { Import, Source } from './sources.ts'

const sources = readSources(['shared', 'server', 'src', 'seeds-demo'])
const everything = [...sources, ...readSources(['tests'])]

/** The row of a file: the longest place that it lies in; the bare `server` and `src` are for files at their top and for `server/cli`. */
function findRow(path: string): Row | null {
  const rows = law.filter(({ place }) => path === place || path.startsWith(`${place}/`)).sort((a, b) => b.place.length - a.place.length)
  const [row] = rows
  if (!row) return null
  const isTop = row.place === 'server' || row.place === 'src'
  return isTop && path.includes('/', row.place.length + 1) && !path.startsWith('server/cli/') ? null : row
}

function isInside(file: string, places: readonly string[]): boolean {
  return places.some((place) => file === place || file.startsWith(place.endsWith('/') ? place : `${place}/`))
}

/** The unit inside which a file may import freely: its row, and for a feature the feature. */
function homeOf(path: string, row: Row): string {
  return row.place === 'src/features' ? path.split('/').slice(0, 3).join('/') : row.place
}

function isAllowed(source: Source, row: Row, { file, written }: Import): boolean {
  if (file === null) return isPackageAllowed(source, row, written)
  if (isTest(source.path) && isInside(file, ['tests', 'seeds-demo'])) return true
  const ofHome = findRow(file)?.place === row.place && isInside(file, [homeOf(source.path, row)])
  return ofHome || isInside(file, row.may)
}

function isPackageAllowed(source: Source, row: Row, written: string): boolean {
  if (written.startsWith('node:')) return !source.path.startsWith('src/') && !source.path.startsWith('shared/') ? true : isTest(source.path)
  const allowed = isTest(source.path) ? [...row.packages, ...testPackages] : row.packages
  return allowed.some((name) => written === name || written.startsWith(name.endsWith('/') ? name : `${name}/`))
}

describe('the import law', () => {
  test('every folder with sources is in the table', () => {
    expect(sources.filter(({ path }) => findRow(path) === null).map(({ path }) => path)).toEqual([])
  })

  test('nothing imports from where its row does not let it', () => {
    const broken = sources.flatMap((source) => {
      const row = findRow(source.path)
      return row === null ? [] : source.imports.filter((one) => !isAllowed(source, row, one)).map(({ written }) => `${source.path} imports ${written}`)
    })
    expect(broken).toEqual([])
  })

  test('a file of one feature that imports another feature, and a component that fetches, would be found', () => {
    const imagine = (path: string, file: string): boolean => {
      const row = findRow(path)
      return row !== null && isAllowed({ path, text: '', imports: [] }, row, { written: `#${file}`, file })
    }
    expect(imagine('src/features/people/sheet.tsx', 'src/features/people/row.tsx')).toBe(true)
    expect(imagine('src/features/people/sheet.tsx', 'src/features/account/row.tsx')).toBe(false)
    expect(imagine('src/components/ui/button.tsx', 'src/api/people.ts')).toBe(false)
    expect(imagine('shared/engine/rank.ts', 'shared/walk/replay.ts')).toBe(false)
    expect(imagine('server/db/client.ts', 'server/services/people.ts')).toBe(false)
    expect(findRow('shared/utils/a.ts')).toBe(null)
    expect(findRow('server/helpers/a.ts')).toBe(null)
  })

  test('no import goes in a circle, types included', () => {
    const targets = new Map(everything.map(({ path, imports }) => [path, imports.flatMap(({ file }) => (file === null ? [] : [file]))]))
    expect(findCircle(targets)).toEqual([])
  })

  test('imports name a file with its ending, with # from another folder and a short way from beside', () => {
    const odd = everything.flatMap(({ path, imports }) =>
      imports.filter(({ written, file }) => file !== null && (written.startsWith('../..') || !existsSync(file))).map(({ written }) => `${path} imports ${written}`),
    )
    expect(odd).toEqual([])
  })
})

describe('names', () => {
  test('files and folders are kebab-case, and none is called after nothing in particular', () => {
    const odd = everything.map(({ path }) => path).filter((path) => !/^[a-z0-9./-]+$/.test(path) || /(^|\/)(utils?|helpers?|common|types|misc|index)(\/|\.)/.test(path))
    expect(odd).toEqual([])
  })
})

/** One circle of files, or an empty list: depth first, with the files on the path marked. */
function findCircle(targets: ReadonlyMap<string, readonly string[]>): readonly string[] {
  const done = new Set<string>()
  const path: string[] = []
  const visit = (file: string): readonly string[] | null => {
    if (path.includes(file)) return [...path.slice(path.indexOf(file)), file]
    if (done.has(file)) return null
    path.push(file)
    for (const target of targets.get(file) ?? []) {
      const circle = visit(target)
      if (circle) return circle
    }
    path.pop()
    done.add(file)
    return null
  }
  for (const file of targets.keys()) {
    const circle = visit(file)
    if (circle) return circle
  }
  return []
}
