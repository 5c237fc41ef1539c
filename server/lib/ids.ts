import { randomBytes } from 'node:crypto'

/**
 * Makes UUIDs of version 7 (RFC 9562, 5.7): 48 bits of Unix milliseconds, then a counter of 12 bits that starts at random in its
 * lower half and rises within one millisecond (6.2, method 1), then 62 random bits. A clock that stands still or steps back keeps
 * the last millisecond, so that one process hands out rising ids. They name things; nothing is ordered by them.
 */
export function createIdSource(now: () => number, random: (bytes: number) => Uint8Array = randomBytes): () => string {
  let lastMs = -1
  let counter = 0
  return () => {
    const bytes = Uint8Array.from(random(16))
    const view = new DataView(bytes.buffer)
    const ms = Math.floor(now())
    if (ms > lastMs) {
      lastMs = ms
      counter = view.getUint16(6) & 0x7ff
    } else if (counter < 0xfff) {
      counter += 1
    } else {
      lastMs += 1
      counter = view.getUint16(6) & 0x7ff
    }
    view.setUint16(0, Math.floor(lastMs / 2 ** 32))
    view.setUint32(2, lastMs % 2 ** 32)
    view.setUint16(6, 0x7000 | counter)
    view.setUint8(8, 0x80 | (view.getUint8(8) & 0x3f))
    const hex = Buffer.from(bytes).toString('hex')
    return `${hex.slice(0, 8)}-${hex.slice(8, 12)}-${hex.slice(12, 16)}-${hex.slice(16, 20)}-${hex.slice(20)}`
  }
}

/** A secret that nobody can guess, for links and sessions: at least 16 bytes (128 bits) from the system's generator, base64url. */
export function randomToken(bytes: number): string {
  if (bytes < 16) throw new RangeError('A token needs at least 16 bytes.')
  return randomBytes(bytes).toString('base64url')
}
