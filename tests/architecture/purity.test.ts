import ts from 'typescript'
import { describe, expect, test } from 'vitest'

import { isTest, readSources } from './sources.ts'

/**
 * What the core may not ask for, as far as its language knows it: time, chance and the words of a country. What browsers and Node add
 * does not compile there (shared/tsconfig.json); the commonest of it is named here all the same, in case somebody adds the types.
 */
const refused = new Set(['Date', 'Intl', 'globalThis', 'eval', 'Function', 'performance', 'crypto', 'process', 'fetch', 'console', 'setTimeout', 'setInterval', 'require'])
const refusedMembers = new Set(['Math.random', 'toLocaleString', 'toLocaleUpperCase', 'toLocaleLowerCase', 'toLocaleDateString', 'toLocaleTimeString', 'localeCompare'])

/** The places of a source that ask the world for something. */
function findImpurities(path: string, text: string): string[] {
  const file = ts.createSourceFile(path, text, ts.ScriptTarget.ES2023, true)
  const found: string[] = []
  const note = (node: ts.Node): void => void found.push(`${path}:${file.getLineAndCharacterOfPosition(node.getStart()).line + 1} ${node.getText()}`)
  const visit = (node: ts.Node): void => {
    if (ts.isPropertyAccessExpression(node) && (refusedMembers.has(node.getText()) || refusedMembers.has(node.name.text))) note(node)
    if (ts.isIdentifier(node) && refused.has(node.text) && isUse(node)) note(node)
    ts.forEachChild(node, visit)
  }
  visit(file)
  return found
}

/** True for a name that stands for a value of the world, false for the name of a property, a parameter or a variable of one's own. */
function isUse(node: ts.Identifier): boolean {
  const { parent } = node
  if (ts.isPropertyAccessExpression(parent)) return parent.expression === node
  if (ts.isPropertyAssignment(parent) || ts.isPropertySignature(parent) || ts.isParameter(parent) || ts.isVariableDeclaration(parent) || ts.isBindingElement(parent)) {
    return 'initializer' in parent && parent.initializer === node
  }
  return true
}

describe('the core asks for nothing', () => {
  test('no file of shared/ reads a clock, chance, the network, the screen or the machine', () => {
    const sources = readSources(['shared']).filter(({ path }) => !isTest(path))
    expect(sources.length).toBeGreaterThan(20)
    expect(sources.flatMap(({ path, text }) => findImpurities(path, text))).toEqual([])
  })

  test('each way of asking would be found', () => {
    const ways = ['new Date()', 'Date.now()', 'Math.random()', 'const r = Math.random', 'setTimeout(f, 1)', 'x(process.env)', 'console.log(1)', 'crypto.randomUUID()', 'fetch(u)', 'a.localeCompare(b)', 'globalThis.x']
    expect(ways.filter((way) => findImpurities('imagined.ts', way).length === 0)).toEqual([])
    expect(findImpurities('imagined.ts', 'export function f(chart: { process: string }) { return [chart.process, chart.nodes.fetch] }')).toEqual([])
  })
})
