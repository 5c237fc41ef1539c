import { useWatch } from 'react-hook-form'

import { createFirstOwner } from '#shared/api/session.ts'
import { useCreateFirstOwner } from '#src/api/session.ts'
import { Button } from '#src/components/ui/button.tsx'
import { TextField } from '#src/components/ui/field.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { useZodForm } from '#src/lib/use-zod-form.ts'

import { NewPasswordField } from './new-password.tsx'
import { withNewPassword } from './with-new-password.ts'

const schema = withNewPassword(createFirstOwner.body)

/** The first owner of a new shop, with the code that the server printed when it started. */
export function SetUpForm({ onDone }: { readonly onDone: () => void }) {
  const { mutate, isPending } = useCreateFirstOwner()
  const form = useZodForm(schema, { code: '', name: '', email: '', password: '' })
  const typed = useWatch({ control: form.control, name: 'password' })
  const { errors } = form.formState
  return (
    <form
      noValidate
      className="grid gap-5"
      onSubmit={(event) => void form.handleSubmit((body) => mutate(body, { onSuccess: onDone, onError: form.showProblem }))(event)}
    >
      {errors.root?.message !== undefined && (
        <Notice state="bad" role="alert" title="The shop has no owner yet">
          {errors.root.message}
        </Notice>
      )}
      <TextField
        label="One-time code"
        hint="The server printed it where it was started."
        autoComplete="one-time-code"
        autoCapitalize="off"
        spellCheck={false}
        className="figures"
        error={errors.code?.message}
        {...form.register('code')}
      />
      <TextField label="Your name" autoComplete="name" error={errors.name?.message} {...form.register('name')} />
      <TextField
        label="E-mail"
        hint="You sign in with it."
        type="email"
        inputMode="email"
        autoComplete="username"
        autoCapitalize="off"
        spellCheck={false}
        error={errors.email?.message}
        {...form.register('email')}
      />
      <NewPasswordField label="Password" typed={typed} error={errors.password?.message} {...form.register('password')} />
      <Button look="primary" size="large" type="submit" busy={isPending && 'Making you the owner'} className="mt-1">
        Open the shop
      </Button>
    </form>
  )
}
