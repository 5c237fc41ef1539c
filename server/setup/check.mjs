// What must hold before a change is ready: types, types of the core under its own settings, lint, and then architecture and units.
// Prints what each found, then one line with the sum.
import { spawn } from 'node:child_process'

const node = (...args) => ({ command: process.execPath, args })
const checks = [
  ['Types', node('node_modules/typescript/bin/tsc', '--noEmit', '-p', '.')],
  ['Types of the core', node('node_modules/typescript/bin/tsc', '--noEmit', '-p', 'shared')],
  ['Lint', node('node_modules/eslint/bin/eslint.js', '--config', '.eslint.config.js', '--max-warnings', '0', '.')],
]

function run({ command, args }) {
  return new Promise((resolve) => {
    const child = spawn(command, args, { stdio: ['ignore', 'pipe', 'pipe'] })
    let output = ''
    child.stdout.on('data', (chunk) => (output += chunk))
    child.stderr.on('data', (chunk) => (output += chunk))
    child.on('close', (status) => resolve({ isFine: status === 0, output }))
  })
}

const startedAt = Date.now()
const running = run(node('--import', 'tsx', 'tests/run.ts', '--quick'))
const results = await Promise.all(
  checks.map(async ([words, command]) => {
    const { isFine, output } = await run(command)
    process.stdout.write(`${isFine ? 'ok' : 'FAILED'}  ${words}\n${isFine ? '' : output}`)
    return isFine
  }),
)
const tests = await running
process.stdout.write(tests.output)
const [, unitsPassed = '0', unitsFailed = '1'] = /(\d+) passed, (\d+) failed\s*$/.exec(tests.output) ?? []
const passed = results.filter(Boolean).length + Number(unitsPassed)
const failed = results.filter((isFine) => !isFine).length + Number(unitsFailed)
process.stdout.write(`\nChecked in ${Math.round((Date.now() - startedAt) / 1000)} s\n${passed} passed, ${failed} failed\n`)
process.exitCode = failed > 0 ? 1 : 0
