import { addPerson } from '#shared/api/people.ts'
import { useAddPerson } from '#src/api/people.ts'
import { Button } from '#src/components/ui/button.tsx'
import { RadioGroup, TextField } from '#src/components/ui/field.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { useZodForm } from '#src/lib/use-zod-form.ts'

import type { HandedLink } from './link-panel.tsx'
import { roleChoices } from './role-choices.ts'

type AddPersonFormProps = { readonly onAdded: (link: HandedLink) => void; readonly onCancel: () => void }

export function AddPersonForm({ onAdded, onCancel }: AddPersonFormProps) {
  const { mutate, isPending } = useAddPerson()
  const form = useZodForm(addPerson.body, { name: '', email: '', role: 'junior' })
  const { errors } = form.formState
  return (
    <section aria-labelledby="add-person" className="border-y border-rule bg-card p-4 [--mark-ground:var(--card)]">
      <h2 id="add-person" className="title">
        Add a person
      </h2>
      <form
        noValidate
        className="mt-4 grid gap-5"
        onSubmit={(event) =>
          void form.handleSubmit((body) =>
            mutate(body, { onSuccess: ({ person, link }) => onAdded({ name: person.name, ...link }), onError: form.showProblem }),
          )(event)
        }
      >
        {errors.root?.message !== undefined && (
          <Notice state="bad" role="alert" title="Nobody was added">
            {errors.root.message}
          </Notice>
        )}
        <div className="grid gap-5 md:grid-cols-2">
          <div className="grid content-start gap-5">
            {/* The form came because it was asked for: the first field is where the hands are wanted. */}
            <TextField label="Name" autoComplete="off" autoFocus error={errors.name?.message} {...form.register('name')} />
            <TextField
              label="E-mail"
              hint="They sign in with it. No mail is sent: you hand over the link yourself."
              type="email"
              inputMode="email"
              autoComplete="off"
              autoCapitalize="off"
              spellCheck={false}
              error={errors.email?.message}
              {...form.register('email')}
            />
          </div>
          <RadioGroup label="Role" choices={roleChoices} error={errors.role?.message} {...form.register('role')} />
        </div>
        <div className="flex flex-wrap gap-3">
          <Button look="primary" type="submit" busy={isPending && 'Adding'}>
            Add and make the link
          </Button>
          <Button onClick={onCancel}>Cancel</Button>
        </div>
      </form>
    </section>
  )
}
