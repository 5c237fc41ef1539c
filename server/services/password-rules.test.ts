import { describe, expect, test } from 'vitest'
import { judgePassword } from './password-rules.ts'

const owner = { name: 'Jo Example', email: 'jo@fernhill-repairs.example', shopName: 'Fernhill Repairs' }
const judge = (password: string) => judgePassword(password, owner)

describe('what makes a password good enough', () => {
  test('fourteen characters are too few, fifteen lower-case letters are enough', () => {
    expect(judge('vgkqzmwbtxnrpd')).toMatch(/At least 15 characters: this has 14/)
    expect(judge('vgkqzmwbtxnrpdh')).toBeNull()
  })

  test('a phrase of 64 characters is accepted, with spaces and in any script', () => {
    expect(judge('late frost on the yard and nobody thought to cover the pumps up!')).toBeNull()
    expect(judge('зимний сад под снегом')).toBeNull()
    expect(judge('äpfel über köln nie')).toBeNull()
  })

  test('over 72 bytes is refused in words that name the bytes, at 72 it is not', () => {
    const phrase = 'vat lemon trout 9 gable wren oxide plinth mauve quartz ferry dune kelp x'
    expect(Buffer.byteLength(phrase)).toBe(72)
    expect(judge(phrase)).toBeNull()
    expect(judge(`${phrase}y`)).toMatch(/At most 72 bytes: this has 73/)
    expect(judge('ü'.repeat(20) + phrase.slice(0, 40))).toMatch(/At most 72 bytes: this has 80/)
  })

  test.each([
    'passwordpassword',
    'Password1234567',
    'P@ssw0rdP@ssw0rd1',
    'aaaaaaaaaaaaaaaa',
    '123456789012345',
    'abcdefghijklmnop',
    'qwertyuiopasdfghjkl',
    '1qaz2wsx3edc4rfv',
    'qwerty123456789',
    'iloveyouforever',
    'letmeinletmein123',
    'correct horse battery staple',
    'welcome to my shop',
    'Summer2026Winter2027',
    'changemechangeme',
    'pullcord pullcord',
    'carburetor12345',
    'carburettor-2026',
    'Fernhill Repairs 1',
    'jo@fernhill-repairs.example',
    'example example 99',
    'chainsawchainsaw!',
    'zxcvbnmzxcvbnm,1',
    '111111111111111',
    'xyxyxyxyxyxyxyxy',
    'trustno1trustno1',
    'administrator2026!',
    'football-baseball-77',
  ])('%s is among the first that anybody would try', (password) => {
    expect(judge(password)).toMatch(/among the first/)
  })

  test.each(['late frost on the yard', 'three pulls then choke off', 'new gloves every friday', 'Vellum-tractor-oslo-9', 'kettle under gravel roof'])(
    '%s is good enough',
    (password) => {
      expect(judge(password)).toBeNull()
    },
  )
})
