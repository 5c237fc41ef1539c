import { spawn } from 'node:child_process'
import { fileURLToPath } from 'node:url'

import { expect, test } from 'vitest'

import { makeFolder } from './programs.ts'

/** Lets the writer run until it has acknowledged so many rows, kills it, and answers what it found at its start and what it acknowledged. */
async function writeUntilKilled(folder: string, rows: number): Promise<{ found: number[]; acknowledged: number[] }> {
  const child = spawn(process.execPath, ['--import', 'tsx', fileURLToPath(new URL('./commit-writer.ts', import.meta.url)), folder], { stdio: ['ignore', 'pipe', 'inherit'] })
  let output = ''
  const listLines = (): string[] => output.split('\n').slice(0, -1)
  child.stdout.setEncoding('utf8').on('data', (chunk: string) => {
    output += chunk
    if (listLines().length > rows) child.kill('SIGKILL')
  })
  await new Promise((resolve) => child.once('close', resolve))
  const [found = '', ...acknowledged] = listLines()
  return { found: found.replace('found ', '').split(',').filter(Boolean).map(Number), acknowledged: acknowledged.map(Number) }
}

test('the database, killed six times while it commits, opens again each time with every row that it had acknowledged', async () => {
  const folder = await makeFolder()
  let acknowledged: number[] = []
  for (let cycle = 0; cycle < 6; cycle += 1) {
    const run = await writeUntilKilled(folder, 20 + cycle * 17)
    expect(run.found).toEqual(expect.arrayContaining(acknowledged))
    expect(run.acknowledged.length).toBeGreaterThan(0)
    acknowledged = [...acknowledged, ...run.acknowledged]
  }
})
