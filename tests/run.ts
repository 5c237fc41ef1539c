import { spawnSync } from 'node:child_process'
import { existsSync, mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'

import { z } from 'zod'

import { startThrowawayPostgres } from './support/throwaway-postgres.ts'

/** One run of the test runner: which projects, with which database. */
type Part = { readonly words: string; readonly args: readonly string[]; readonly environment?: Readonly<Record<string, string>> }
type Count = { readonly passed: number; readonly failed: number }

const reportSchema = z.object({
  numPassedTests: z.number(),
  numFailedTests: z.number(),
  testResults: z.array(z.object({ status: z.string(), assertionResults: z.array(z.object({ status: z.string() })) })),
})

const hasPostgres = existsSync('/usr/lib/postgresql')
const isQuick = process.argv.includes('--quick')
const counts: Count[] = []
// Units share their processes: most are over before a process of their own would have started.
counts.push(runPart({ words: 'Architecture and units', args: ['--project', 'unit', '--no-isolate'] }))
if (!isQuick) {
  counts.push(runPart({ words: 'Screens and the API on PGlite', args: ['--project', 'ui', '--project', 'api'] }))
  counts.push(...(await runOnPostgres()))
  counts.push(runPart({ words: 'Processes', args: ['--project', 'process', ...(hasPostgres ? [] : ['--exclude', '**/postgres.test.ts'])] }))
  if (existsSync('/usr/bin/chromium')) counts.push(runPart({ words: 'Journeys in the browser', args: ['--project', 'e2e'] }))
  else process.stdout.write('\nLEFT OUT: the journeys in the browser, because there is no /usr/bin/chromium.\n')
}
const passed = counts.reduce((sum, count) => sum + count.passed, 0)
const failed = counts.reduce((sum, count) => sum + count.failed, 0)
process.stdout.write(`\n${passed} passed, ${failed} failed\n`)
process.exitCode = failed > 0 || passed === 0 ? 1 : 0

async function runOnPostgres(): Promise<Count[]> {
  if (!hasPostgres) {
    process.stdout.write('\nLEFT OUT: what needs PostgreSQL, because Debian\'s PostgreSQL is not installed.\n')
    return []
  }
  const server = await startThrowawayPostgres()
  try {
    const environment = { PULLCORD_TEST_DATABASE_URL: server.url }
    return [
      runPart({ words: 'The API on PostgreSQL', args: ['--project', 'api'], environment }),
      runPart({ words: 'The data layer on PostgreSQL', args: ['--project', 'unit', '--no-isolate', 'server/db'], environment }),
    ]
  } finally {
    await server.stop()
  }
}

function runPart({ words, args, environment }: Part): Count {
  process.stdout.write(`\n== ${words}\n`)
  const folder = mkdtempSync(join(tmpdir(), 'pullcord-tests-'))
  const report = join(folder, 'report.json')
  const vitest = ['node_modules/vitest/vitest.mjs', 'run', ...args, '--reporter=dot', '--reporter=json', `--outputFile.json=${report}`]
  const { status } = spawnSync(process.execPath, vitest, { stdio: 'inherit', env: { ...process.env, ...environment } })
  try {
    return readCount(report, status === 0)
  } finally {
    rmSync(folder, { recursive: true, force: true })
  }
}

/** Counts what the report says; a file that could not be loaded, and a run that ended badly in any other way, is a failure too. */
function readCount(report: string, isFine: boolean): Count {
  if (!existsSync(report)) return { passed: 0, failed: 1 }
  const { numPassedTests, numFailedTests, testResults } = reportSchema.parse(JSON.parse(readFileSync(report, 'utf8')))
  const broken = testResults.filter((file) => file.status === 'failed' && !file.assertionResults.some((one) => one.status === 'failed')).length
  const failed = numFailedTests + broken
  return { passed: numPassedTests, failed: failed === 0 && !isFine ? 1 : failed }
}
