import type { FormEvent } from 'react'
import { useRef, useState } from 'react'

import { signIn } from '#shared/api/session.ts'
import { useSignIn } from '#src/api/session.ts'
import { Button } from '#src/components/ui/button.tsx'
import { PasswordField, TextField } from '#src/components/ui/field.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { toWords } from '#src/lib/problem-words.ts'

import type { DemoPerson } from './demo-people.tsx'
import { DemoPeople } from './demo-people.tsx'

type SignInFormProps = {
  /** Empty in a real shop. */
  readonly demoSignIns: readonly DemoPerson[]
  readonly onSignedIn: () => void
}

type Faults = { readonly email?: string; readonly password?: string }

/** The first page anybody loads: two fields over the contract, without the form library that the other forms bring along. */
export function SignInForm({ demoSignIns, onSignedIn }: SignInFormProps) {
  const { mutate, isPending, error } = useSignIn()
  const [typed, setTyped] = useState({ email: '', password: '' })
  const [faults, setFaults] = useState<Faults>({})
  const emailField = useRef<HTMLInputElement>(null)
  const passwordField = useRef<HTMLInputElement>(null)

  const onSubmit = (event: FormEvent): void => {
    event.preventDefault()
    const found = findFaults(typed)
    setFaults(found)
    if (found.email !== undefined) emailField.current?.focus()
    else if (found.password !== undefined) passwordField.current?.focus()
    else mutate(typed, { onSuccess: onSignedIn, onError: onRefused })
  }

  const onRefused = (): void => {
    passwordField.current?.focus()
    passwordField.current?.select()
  }

  const onType = (change: Partial<typeof typed>): void => {
    const next = { ...typed, ...change }
    setTyped(next)
    // A fault that was shown goes as soon as it is mended; no new one comes up while somebody is typing.
    const left = findFaults(next)
    setFaults((shown) => ({
      ...(shown.email !== undefined && left.email !== undefined && { email: left.email }),
      ...(shown.password !== undefined && left.password !== undefined && { password: left.password }),
    }))
  }

  const onPick = ({ email, password }: DemoPerson): void => {
    onType({ email, password })
    passwordField.current?.focus()
  }

  return (
    <>
      <form noValidate className="grid gap-5" onSubmit={onSubmit}>
        {error !== null && (
          <Notice state="bad" role="alert" title="Not signed in">
            {toWords(error)}
          </Notice>
        )}
        <TextField
          ref={emailField}
          label="E-mail"
          type="email"
          inputMode="email"
          name="email"
          autoComplete="username"
          autoCapitalize="off"
          spellCheck={false}
          value={typed.email}
          error={faults.email}
          onChange={(event) => onType({ email: event.target.value })}
        />
        <PasswordField
          ref={passwordField}
          label="Password"
          name="password"
          autoComplete="current-password"
          value={typed.password}
          error={faults.password}
          onChange={(event) => onType({ password: event.target.value })}
        />
        <Button look="primary" size="large" type="submit" busy={isPending && 'Signing in'} className="mt-1">
          Sign in
        </Button>
      </form>
      {demoSignIns.length > 0 ? (
        <DemoPeople people={demoSignIns} onPick={onPick} />
      ) : (
        <p className="mt-6 text-small text-ink-2">Forgotten your password? The shop’s owner makes you a new link.</p>
      )}
    </>
  )
}

function findFaults(typed: { readonly email: string; readonly password: string }): Faults {
  const parsed = signIn.body.safeParse(typed)
  if (parsed.success) return {}
  const messageOf = (field: keyof Faults) => parsed.error.issues.find(({ path }) => path[0] === field)?.message
  const email = messageOf('email')
  const password = messageOf('password')
  return { ...(email !== undefined && { email }), ...(password !== undefined && { password }) }
}
