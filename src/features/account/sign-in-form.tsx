import { signIn } from '#shared/api/session.ts'
import { useSignIn } from '#src/api/session.ts'
import { Button } from '#src/components/ui/button.tsx'
import { PasswordField, TextField } from '#src/components/ui/field.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { useZodForm } from '#src/lib/use-zod-form.ts'

import type { DemoPerson } from './demo-people.tsx'
import { DemoPeople } from './demo-people.tsx'

type SignInFormProps = {
  /** Empty in a real shop. */
  readonly demoSignIns: readonly DemoPerson[]
  readonly onSignedIn: () => void
}

export function SignInForm({ demoSignIns, onSignedIn }: SignInFormProps) {
  const { mutate, isPending } = useSignIn()
  const form = useZodForm(signIn.body, { email: '', password: '' })
  const { errors } = form.formState

  const fill = ({ email, password }: DemoPerson): void => {
    form.reset({ email, password })
    form.setFocus('password')
  }

  return (
    <>
      <form
        noValidate
        className="grid gap-5"
        onSubmit={(event) => void form.handleSubmit((body) => mutate(body, { onSuccess: onSignedIn, onError: form.showProblem }))(event)}
      >
        {errors.root?.message !== undefined && (
          <Notice state="bad" role="alert" title="Not signed in">
            {errors.root.message}
          </Notice>
        )}
        <TextField
          label="E-mail"
          type="email"
          inputMode="email"
          autoComplete="username"
          autoCapitalize="off"
          spellCheck={false}
          error={errors.email?.message}
          {...form.register('email')}
        />
        <PasswordField label="Password" autoComplete="current-password" error={errors.password?.message} {...form.register('password')} />
        <Button look="primary" size="large" type="submit" busy={isPending && 'Signing in'} className="mt-1">
          Sign in
        </Button>
      </form>
      {demoSignIns.length > 0 ? (
        <DemoPeople people={demoSignIns} onPick={fill} />
      ) : (
        <p className="mt-6 text-small text-ink-2">Forgotten your password? The shop’s owner makes you a new link.</p>
      )}
    </>
  )
}
