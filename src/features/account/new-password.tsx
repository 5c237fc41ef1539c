import type { ComponentProps } from 'react'

import { PasswordField } from '#src/components/ui/field.tsx'

/** NIST SP 800-63B-4 (2025), 3.1.1.2: a password used alone has 15 characters or more; every Unicode code point counts as one. */
const leastCharacters = 15
/** What the hash can hold; more would be cut in silence, so it is refused in words. */
const mostBytes = 72

export function countCharacters(password: string): number {
  return [...password.normalize('NFC')].length
}

export function countBytes(password: string): number {
  return new TextEncoder().encode(password).length
}

/** What stands under the field while a new password is written; the server judges for itself, common ones included. */
export function describeNewPassword(password: string): string {
  const characters = countCharacters(password)
  const bytes = countBytes(password)
  if (bytes > mostBytes) return `Too long: ${bytes} bytes of at most ${mostBytes}. Take ${bytes - mostBytes} off; letters with accents count double.`
  if (characters === 0) return `At least ${leastCharacters} characters. A few words in a row are easiest to remember.`
  if (characters < leastCharacters) return `${characters} of at least ${leastCharacters} characters.`
  return `${characters} characters, long enough.`
}

/** What is wrong with the length of a new password, or `undefined`. */
export function refuseNewPassword(password: string): string | undefined {
  if (countBytes(password) > mostBytes) return describeNewPassword(password)
  if (countCharacters(password) < leastCharacters) return `Write at least ${leastCharacters} characters.`
  return undefined
}

type NewPasswordFieldProps = Omit<ComponentProps<typeof PasswordField>, 'autoComplete' | 'hint' | 'label'> & {
  readonly label?: string
  /** What is typed so far, for the count under the field. */
  readonly typed: string
}

/** Says how long it is while it is written; one that is too long is refused at once, since typing on cannot mend it. */
export function NewPasswordField({ label = 'New password', typed, error, ...rest }: NewPasswordFieldProps) {
  const words = describeNewPassword(typed)
  const isTooLong = countBytes(typed) > mostBytes
  return <PasswordField {...rest} label={label} autoComplete="new-password" error={isTooLong ? words : error} hint={isTooLong ? undefined : words} />
}
