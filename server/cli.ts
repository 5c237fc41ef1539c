import { runCommandLine } from './cli/dispatch.ts'

process.exitCode = await runCommandLine(process.argv.slice(2))
