// Makes a fresh copy of the project ready to run: plain JavaScript with Node's own modules, because nothing is installed yet.
//   node server/setup/prepare.mjs start | test | build | install | cli
import { spawnSync } from 'node:child_process'
import { createHash } from 'node:crypto'
import { existsSync, mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { fileURLToPath } from 'node:url'

const root = join(dirname(fileURLToPath(import.meta.url)), '../..')
const lockFile = join(root, 'package-lock.json')
const installStamp = join(root, 'node_modules/.pullcord-install')
const buildStamp = join(root, 'dist/.pullcord-build')

const purpose = process.argv[2]
/** The command line's own output is JSON, so its preparation speaks on the other stream. */
const isQuiet = purpose === 'cli'
const say = (words) => (isQuiet ? process.stderr : process.stdout).write(`${words}\n`)

function giveUp(words) {
  process.stderr.write(`${words}\n`)
  process.exit(1)
}

function run(words, command, args, environment = {}) {
  say(words)
  const { status, error } = spawnSync(command, args, { cwd: root, stdio: ['inherit', isQuiet ? 2 : 'inherit', 'inherit'], env: { ...process.env, ...environment } })
  if (error) giveUp(`${command} could not be run: ${error.message}`)
  if (status !== 0) giveUp(`That failed: ${[command, ...args].join(' ')}`)
}

/** Installs what package-lock.json names, unless exactly that is there: a folder alone may be the rest of an interrupted install. */
function install() {
  const wanted = createHash('sha256').update(readFileSync(lockFile)).digest('hex')
  if (existsSync(installStamp) && readFileSync(installStamp, 'utf8') === wanted) return
  if (!isInstalledByHand()) {
    const args = ['ci', '--ignore-scripts', '--no-audit', '--no-fund', '--include=dev']
    const npm = process.env.npm_execpath
    run('Installing the packages (about a minute, once)', ...(npm ? [process.execPath, [npm, ...args]] : ['npm', args]))
  }
  writeFileSync(installStamp, wanted)
}

/** True when a plain `npm ci` has done it: the list that npm leaves behind then agrees with the lock file. */
function isInstalledByHand() {
  const listFile = join(root, 'node_modules/.package-lock.json')
  if (!existsSync(listFile)) return false
  const wanted = JSON.parse(readFileSync(lockFile, 'utf8')).packages
  const there = JSON.parse(readFileSync(listFile, 'utf8')).packages
  const isWhole = Object.entries(wanted).every(([path, { version, optional }]) => path === '' || (there[path] ? there[path].version === version : optional === true))
  return isWhole && Object.keys(there).every((path) => wanted[path])
}

/**
 * Builds the pages when they are missing or older than what they are made from, for production whoever asks: the tests' own setting would make
 * slow pages that a later start serves. The stamp comes last: half a build has none.
 */
function build(isForced) {
  const sources = ['src', 'shared', 'index.html', 'vite.config.ts', 'package-lock.json'].map((name) => join(root, name))
  if (!isForced && existsSync(buildStamp) && statSync(buildStamp).mtimeMs > Math.max(...sources.map(newest))) return
  run('Building the pages', process.execPath, [join(root, 'node_modules/vite/bin/vite.js'), 'build', '--logLevel', 'warn'], { NODE_ENV: 'production' })
  mkdirSync(dirname(buildStamp), { recursive: true })
  writeFileSync(buildStamp, '')
}

function newest(path) {
  const { mtimeMs } = statSync(path)
  if (!statSync(path).isDirectory()) return mtimeMs
  return Math.max(mtimeMs, ...readdirSync(path).map((name) => newest(join(path, name))))
}

/** The tests need a browser and a PostgreSQL server, both from Debian. */
function makeSureOfDebianPackages() {
  const missing = []
  if (!existsSync('/usr/bin/chromium')) missing.push('chromium')
  const versions = existsSync('/usr/lib/postgresql') ? readdirSync('/usr/lib/postgresql') : []
  if (!versions.some((version) => existsSync(`/usr/lib/postgresql/${version}/bin/initdb`))) missing.push('postgresql')
  if (missing.length === 0) return
  const installArgs = ['install', '-y', '--no-install-recommends', ...missing]
  if (process.getuid?.() !== 0) {
    const words = `The tests need ${missing.join(' and ')}. Install with:\n\n  sudo apt-get update && sudo apt-get ${installArgs.join(' ')}\n`
    if (process.env.CI === 'true') giveUp(words)
    say(`${words}\nUntil then the tests that need ${missing.length === 1 ? 'it' : 'them'} are LEFT OUT.`)
    return
  }
  run('Looking up the packages of Debian', 'apt-get', ['update', '-qq'])
  // At this run level Debian does not start the server that it has just installed: the tests start one of their own.
  run(`Installing ${missing.join(' and ')} (for the tests)`, 'apt-get', ['-qq', ...installArgs], { DEBIAN_FRONTEND: 'noninteractive', RUNLEVEL: '1' })
}

const [major = 0, minor = 0] = process.versions.node.split('.').map(Number)
if (!((major === 20 && minor >= 19) || major >= 22)) giveUp(`Pullcord needs Node 20.19 or later in that line, or 22 and up; this is ${process.versions.node}.`)
install()
if (purpose === 'test') makeSureOfDebianPackages()
if (purpose !== 'install' && purpose !== 'cli') build(purpose === 'build')
