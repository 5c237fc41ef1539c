import { AppError } from '#server/lib/app-error.ts'

/** Shortest password where nothing stands beside it (NIST SP 800-63B-4, 2025, 3.1.1.2). */
export const passwordMinCharacters = 15
/** Longest that bcrypt reads to its end; a longer one is refused, since its tail would not count. */
export const passwordMaxBytes = 72

/** Who the password is for: their own names are tried first by anybody who knows them. */
export interface PasswordOwner {
  readonly name: string
  readonly email: string
  readonly shopName: string
}

/** What common passwords are put together from, most of them seen at the head of every published list of leaked ones. */
const commonParts = `
  password passwort passwd pass word letmein welcome admin administrator login logon signin master root user guest test testing tester secret
  changeme change default qwerty qwertz azerty asdf zxcv iloveyou iloveu love lovely forever always princess prince sunshine sunflower monkey dragon
  football baseball basketball hockey soccer superman batman spiderman pokemon starwars shadow michael jennifer jessica ashley charlie jordan
  thomas daniel robert summer winter spring autumn hello hallo computer internet windows google facebook twitter youtube whatever freedom trustno
  trust nobody access flower cookie pepper ginger tigger buster killer hunter ranger soldier angel angels babygirl baby girl boy family mother
  father friend friends money diamond silver golden purple orange banana chocolate cheese coffee butterfly happy lucky star stars moon sun
  london paris berlin america england january february march april may june july august september october november december monday tuesday
  wednesday thursday friday saturday sunday correct horse battery staple my your the this that is is not are you me and for our new old best
  work office company business shop store bench workshop garage repair repairs service mechanic technician owner lead junior saw chain chainsaw trimmer
  mower blower pump engine engines motor small carburetor carburettor carb spark plug clutch muffler throttle choke fuel petrol gasoline
  starter cord pull pullcord chart walk ticket lawn garden tool tools machine
`
  .trim()
  .split(/\s+/)

const runs = [
  'abcdefghijklmnopqrstuvwxyz',
  '01234567890',
  '12345678901234567890',
  'qwertyuiop',
  'qwertzuiop',
  'azertyuiop',
  'asdfghjkl',
  'zxcvbnm',
  'yxcvbnm',
  '1qaz2wsx3edc4rfv',
  'qazwsxedcrfv',
]
const allRuns = runs.flatMap((run) => [run, [...run].reverse().join('')])
const lookAlikes: Readonly<Record<string, string>> = { '0': 'o', '1': 'l', '3': 'e', '4': 'a', '5': 's', '7': 't', '8': 'b', '@': 'a', $: 's', '!': 'i' }

/** Fewer characters than this beside the common parts make a password that is guessed early. */
const ownCharactersMin = 5

/** Refuses a password that is too short, longer than is read, or guessed early; judged and later hashed exactly as it was typed. */
export function checkPassword(password: string, owner: PasswordOwner): void {
  const refusal = judgePassword(password, owner)
  if (refusal !== null) throw new AppError('weak-password', refusal, { errors: [{ pointer: '#/password', detail: refusal }] })
}

/** Why a password is not good enough, in words, or null. No rule asks for kinds of characters. */
export function judgePassword(password: string, owner: PasswordOwner): string | null {
  const characters = [...password].length
  if (characters < passwordMinCharacters)
    return `At least ${passwordMinCharacters} characters: this has ${characters}. Four or five words that don't belong together are easy to keep.`
  const bytes = Buffer.byteLength(password)
  if (bytes > passwordMaxBytes)
    return `At most ${passwordMaxBytes} bytes: this has ${bytes}, and the end would not count. Take a shorter one; a letter with an accent counts as two, most other scripts as three.`
  if (isGuessedEarly(password, owner))
    return "This is among the first that anybody would try: common words, names, rows of keys or repeats. Take words that don't belong together."
  return null
}

function isGuessedEarly(password: string, owner: PasswordOwner): boolean {
  const lower = password.normalize('NFKC').toLowerCase()
  const ownParts = [owner.name, owner.email, owner.shopName].flatMap((text) => text.toLowerCase().split(/[^\p{L}\p{N}]+/u)).filter((part) => part.length >= 3)
  const parts = new Set([...commonParts, ...ownParts])
  const asRead = [...lower].map((char) => lookAlikes[char] ?? char).join('')
  return [lower, asRead].some((text) => countOwnCharacters(onlyWords(text), parts) < ownCharactersMin)
}

function onlyWords(text: string): string {
  return text.replace(/[^\p{L}\p{N}]+/gu, '')
}

/** The fewest characters that stay when common parts, runs, repeats and digits are taken out; a repeated whole counts once. */
function countOwnCharacters(text: string, parts: ReadonlySet<string>): number {
  const whole = text.slice(0, shortestPeriod(text))
  const own = Array.from({ length: whole.length + 1 }, () => Number.POSITIVE_INFINITY)
  own[0] = 0
  for (let at = 0; at < whole.length; at++) {
    const here = own[at] ?? 0
    own[at + 1] = Math.min(own[at + 1] ?? 0, here + (/\d/.test(whole[at] ?? '') ? 0.5 : 1))
    for (let end = at + 2; end <= Math.min(whole.length, at + 24); end++) {
      if (isCommon(whole.slice(at, end), parts)) own[end] = Math.min(own[end] ?? 0, here)
    }
  }
  return own[whole.length] ?? 0
}

function isCommon(piece: string, parts: ReadonlySet<string>): boolean {
  if (parts.has(piece)) return true
  if (piece.length < 3) return false
  return new Set(piece).size === 1 || allRuns.some((run) => run.includes(piece)) || /^(19|20)\d\d$/.test(piece)
}

/** Length of the shortest text that, said again and again, gives this one. */
function shortestPeriod(text: string): number {
  for (let period = 1; period <= text.length / 2; period++) {
    if (text.startsWith(text.slice(period))) return period
  }
  return text.length
}
