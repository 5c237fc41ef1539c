import { useState } from 'react'
import { useWatch } from 'react-hook-form'

import { changePassword } from '#shared/api/session.ts'
import { useChangePassword } from '#src/api/session.ts'
import { Button } from '#src/components/ui/button.tsx'
import { PasswordField } from '#src/components/ui/field.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { useZodForm } from '#src/lib/use-zod-form.ts'

import { NewPasswordField } from './new-password.tsx'
import { withNewPassword } from './with-new-password.ts'

const schema = withNewPassword(changePassword.body)

export function ChangePasswordForm({ email }: { readonly email: string }) {
  const { mutate, isPending } = useChangePassword()
  const [isDone, setDone] = useState(false)
  const form = useZodForm(schema, { present: '', password: '' })
  const typed = useWatch({ control: form.control, name: 'password' })
  const { errors } = form.formState

  const onChanged = (): void => {
    form.reset()
    setDone(true)
  }

  return (
    <form
      noValidate
      className="grid max-w-form gap-5"
      onSubmit={(event) => {
        setDone(false)
        void form.handleSubmit((body) => mutate(body, { onSuccess: onChanged, onError: form.showProblem }))(event)
      }}
    >
      {isDone && (
        <Notice state="good" role="status" title="The password is changed">
          Everywhere else you are signed out.
        </Notice>
      )}
      {errors.root?.message !== undefined && (
        <Notice state="bad" role="alert" title="The password stays as it was">
          {errors.root.message}
        </Notice>
      )}
      <input type="email" name="username" autoComplete="username" value={email} readOnly hidden />
      <PasswordField label="Present password" autoComplete="current-password" error={errors.present?.message} {...form.register('present')} />
      <NewPasswordField typed={typed} error={errors.password?.message} {...form.register('password')} />
      <Button look="primary" type="submit" busy={isPending && 'Changing it'} className="justify-self-start">
        Change the password
      </Button>
    </form>
  )
}
