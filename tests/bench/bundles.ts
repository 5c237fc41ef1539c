import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { gzipSync } from 'node:zlib'

import type { Measured } from './report.ts'

const assets = 'dist/assets'
const limitsKb = { entry: 140, player: 110 }

/** Sizes of what a browser loads first, and of the walk player on top of that, in kB after gzip. The pages must be built. */
export function measureBundles(): Measured[] {
  const first = [...readFileSync('dist/index.html', 'utf8').matchAll(/(?:src|href)="\/assets\/([^"]+\.js)"/g)].flatMap(([, file]) => file ?? [])
  const entry = withImports(first)
  const player = withImports(readdirSync(assets).filter((file) => /^walk-[\w-]{8}\.js$/.test(file)))
  if (entry.size === 0 || player.size === 0) throw new Error('The built pages have no entry or no walk player. Build them: npm run build')
  return [
    toMeasured('entry bundle', entry, limitsKb.entry),
    toMeasured("player's chunk with all that it alone brings", new Set([...player].filter((file) => !entry.has(file))), limitsKb.player),
  ]
}

/** Some chunks and all that they import at once, directly or not. */
function withImports(files: readonly string[]): Set<string> {
  const all = new Set<string>()
  const waiting = [...files]
  for (let file = waiting.pop(); file !== undefined; file = waiting.pop()) {
    if (all.has(file)) continue
    all.add(file)
    const code = readFileSync(join(assets, file), 'utf8')
    waiting.push(...[...code.matchAll(/(?:from|import)\s*"\.\/([^"]+\.js)"/g)].flatMap(([, imported]) => imported ?? []))
  }
  return all
}

function toMeasured(what: string, files: ReadonlySet<string>, limitKb: number): Measured {
  const bytes = [...files].reduce((sum, file) => sum + gzipSync(readFileSync(join(assets, file)), { level: 9 }).length, 0)
  return { what, ratio: bytes / 1000 / limitKb, against: `${limitKb} kB after gzip`, goal: { atMost: 1 }, detail: `${(bytes / 1000).toFixed(1)} kB in ${files.size} files` }
}
