import { readdirSync, readFileSync } from 'node:fs'
import { dirname, join, normalize } from 'node:path'
import { fileURLToPath } from 'node:url'

import ts from 'typescript'

const root = fileURLToPath(new URL('../..', import.meta.url))

/** A source file of the project: its path from the top, and everything that it imports, types and lazy imports included. */
export type Source = { readonly path: string; readonly text: string; readonly imports: readonly Import[] }
/** An import as written, and the file of the project that it names, or null for a package or a module of Node's. */
export type Import = { readonly written: string; readonly file: string | null }

/** Reads every TypeScript file under the given folders. */
export function readSources(folders: readonly string[]): readonly Source[] {
  return folders.flatMap(listFiles).map((path) => {
    const text = readFileSync(join(root, path), 'utf8')
    const imports = ts.preProcessFile(text, true, true).importedFiles.map(({ fileName }) => ({ written: fileName, file: toFile(path, fileName) }))
    return { path, text, imports }
  })
}

function listFiles(folder: string): string[] {
  return readdirSync(join(root, folder), { withFileTypes: true }).flatMap((entry) => {
    const path = `${folder}/${entry.name}`
    if (entry.isDirectory()) return listFiles(path)
    return /\.tsx?$/.test(entry.name) ? [path] : []
  })
}

function toFile(from: string, written: string): string | null {
  if (written.startsWith('#')) return written.slice(1)
  return written.startsWith('.') ? normalize(join(dirname(from), written)) : null
}

/** True for a test, or for what only tests use. */
export function isTest(path: string): boolean {
  return /\.test\.tsx?$/.test(path)
}
