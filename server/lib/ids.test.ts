import { describe, expect, test } from 'vitest'

import { createIdSource, randomToken } from './ids.ts'

describe('ids', () => {
  test('the published example of a version 7 id comes out of its own moment and random bits', () => {
    // RFC 9562 (2024), A.6: 2022-02-22 19:22:22 UTC, 0x17F22E279B0, rand_a 0xCC3, rand_b 0x18C4DC0C0C07398F
    // (the counter of ours starts in its lower half, so the top bit of rand_a is cleared: 0x4C3).
    const random = () => Uint8Array.from(Buffer.from('0000000000000cc398c4dc0c0c07398f', 'hex'))
    expect(createIdSource(() => 0x17f22e279b0, random)()).toBe('017f22e2-79b0-74c3-98c4-dc0c0c07398f')
  })

  test('ids rise within one millisecond, over more of them than the counter holds, and when the clock steps back', () => {
    let ms = 1_700_000_000_000
    const newId = createIdSource(() => ms)
    const ids = Array.from({ length: 10_000 }, () => newId())
    ms -= 60_000
    ids.push(newId())
    expect(ids).toEqual([...ids].sort())
    expect(new Set(ids).size).toBe(ids.length)
    expect(ids.every((id) => /^[0-9a-f]{8}-[0-9a-f]{4}-7[0-9a-f]{3}-[89ab][0-9a-f]{3}-[0-9a-f]{12}$/.test(id))).toBe(true)
  })

  test('a token shorter than 128 bits is never made', () => {
    expect(() => randomToken(15)).toThrow(RangeError)
    expect(Buffer.from(randomToken(32), 'base64url')).toHaveLength(32)
  })
})
