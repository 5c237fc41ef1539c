import { useWatch } from 'react-hook-form'

import { useLink as acceptLink } from '#shared/api/people.ts'
import { useAcceptLink } from '#src/api/people.ts'
import { Button } from '#src/components/ui/button.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { useZodForm } from '#src/lib/use-zod-form.ts'

import { NewPasswordField } from './new-password.tsx'
import { withNewPassword } from './with-new-password.ts'

const schema = withNewPassword(acceptLink.body)

type AcceptLinkFormProps = { readonly token: string; readonly email: string; readonly onDone: () => void }

/** Sets the password behind a one-time link. The address stands in the form so that a password manager keeps the pair. */
export function AcceptLinkForm({ token, email, onDone }: AcceptLinkFormProps) {
  const { mutate, isPending } = useAcceptLink(token)
  const form = useZodForm(schema, { password: '' })
  const typed = useWatch({ control: form.control, name: 'password' })
  const { errors } = form.formState
  return (
    <form
      noValidate
      className="grid gap-5"
      onSubmit={(event) => void form.handleSubmit((body) => mutate(body, { onSuccess: onDone, onError: form.showProblem }))(event)}
    >
      {errors.root?.message !== undefined && (
        <Notice state="bad" role="alert" title="The password is not set">
          {errors.root.message}
        </Notice>
      )}
      <input type="email" name="username" autoComplete="username" value={email} readOnly hidden />
      <NewPasswordField label="Password" typed={typed} error={errors.password?.message} {...form.register('password')} />
      <Button look="primary" size="large" type="submit" busy={isPending && 'Setting it'} className="mt-1">
        Set the password
      </Button>
    </form>
  )
}
