import type { DeviceId } from '#shared/lib/ids.ts'

const storageKey = 'pullcord.device'
let lastMillis = 0
let counter = 0
let device: DeviceId | null = null

/** Needs no secure context: plain http in the shop's own network has no randomUUID. */
function randomBytes(count: number): Uint8Array<ArrayBuffer> {
  return crypto.getRandomValues(new Uint8Array(count))
}

/**
 * A UUID of version 7 (RFC 9562, 5.7): the device's milliseconds, a counter that keeps the ids of one millisecond in order
 * (6.2, method 1), the rest random. A name, never an order between devices.
 */
export function newId(now: number = Date.now()): string {
  const isLater = now > lastMillis
  const [high = 0, low = 0] = randomBytes(2)
  // Begins in the lower half, so that the upper one is left to count in.
  counter = isLater ? ((high << 8) | low) & 0x7ff : counter + 1
  if (isLater) lastMillis = now
  if (counter > 0xfff) {
    // The counter of this millisecond is used up, or the clock stood still: borrow the next one.
    counter = 0
    lastMillis += 1
  }
  const time = lastMillis.toString(16).padStart(12, '0')
  const tail = randomBytes(8)
  tail[0] = ((tail[0] ?? 0) & 0x3f) | 0x80
  const hex = [...tail].map((byte) => byte.toString(16).padStart(2, '0')).join('')
  return `${time.slice(0, 8)}-${time.slice(8)}-7${counter.toString(16).padStart(3, '0')}-${hex.slice(0, 4)}-${hex.slice(4)}`
}

/** Names this browser on this device; made once and kept. Where nothing can be kept it lasts as long as the page. */
export function getDeviceId(): DeviceId {
  device ??= readDevice()
  return device
}

function readDevice(): DeviceId {
  // Both are UUIDs, which is all that the brand says.
  const made = newId() as DeviceId
  try {
    const kept = localStorage.getItem(storageKey)
    if (kept !== null && /^[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i.test(kept)) return kept as DeviceId
    localStorage.setItem(storageKey, made)
  } catch {
    // A browser that keeps nothing is another device after each load; the walk then asks before it goes on here.
  }
  return made
}
