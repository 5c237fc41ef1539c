import type { ReactNode } from 'react'
import type { z } from 'zod'

import type { Person } from '#shared/api/people.ts'
import { updatePerson } from '#shared/api/people.ts'
import type { Role } from '#shared/trade/roles.ts'
import { useCreateLink, useUpdatePerson } from '#src/api/people.ts'
import { Button } from '#src/components/ui/button.tsx'
import { RadioGroup, TextField } from '#src/components/ui/field.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { toWords } from '#src/lib/problem-words.ts'
import { useZodForm } from '#src/lib/use-zod-form.ts'

import type { HandedLink } from './link-panel.tsx'
import { describeLink } from './person-words.tsx'
import { roleChoices } from './role-choices.ts'

export type PersonChange = { readonly name?: string; readonly role?: Role; readonly isActive?: boolean }

type PersonEditorProps = {
  readonly person: Person
  readonly now: number
  /** The change and the one that takes it back. */
  readonly onChanged: (person: Person, undo: PersonChange) => void
  readonly onLink: (link: HandedLink) => void
  readonly onClose: () => void
}

const schema = updatePerson.body.pick({ name: true, role: true })

/** Opens below a person's row: name and role in a form; the acts that take effect at once beside it. */
export function PersonEditor({ person, now, onChanged, onLink, onClose }: PersonEditorProps) {
  const update = useUpdatePerson()
  const createLink = useCreateLink()
  const form = useZodForm(schema, { name: person.name, role: person.role })
  const { errors } = form.formState
  const refusal = errors.root?.message ?? (createLink.error === null ? undefined : toWords(createLink.error))

  const change = (body: PersonChange, undo: PersonChange): void =>
    update.mutate({ id: person.id, ...body }, { onSuccess: (answer) => onChanged(answer.person, undo), onError: form.showProblem })

  const onSave = ({ name, role }: z.output<typeof schema>): void => {
    const changed = {
      ...(name !== undefined && name !== person.name && { name }),
      ...(role !== undefined && role !== person.role && { role }),
    }
    if (Object.keys(changed).length === 0) onClose()
    else change(changed, { ...(changed.name !== undefined && { name: person.name }), ...(changed.role !== undefined && { role: person.role }) })
  }

  const isActive = person.status !== 'deactivated'
  const linkWords = describeLink(person, now)
  return (
    <div className="bg-card px-4 py-4 [--mark-ground:var(--card)]">
      {refusal !== undefined && (
        <Notice state="bad" role="alert" title="Nothing was changed" className="mb-4">
          {refusal}
        </Notice>
      )}
      <div className="grid gap-x-10 gap-y-6 md:grid-cols-[minmax(0,3fr)_minmax(0,2fr)]">
        <form noValidate className="grid content-start gap-5" onSubmit={(event) => void form.handleSubmit(onSave)(event)}>
          <TextField label="Name" autoComplete="off" autoFocus error={errors.name?.message} {...form.register('name')} />
          <RadioGroup label="Role" choices={roleChoices} error={errors.role?.message} {...form.register('role')} />
          <div className="flex flex-wrap gap-3">
            <Button look="primary" type="submit" busy={update.isPending && 'Saving'}>
              Save
            </Button>
            <Button onClick={onClose}>Cancel</Button>
          </div>
        </form>
        <div className="grid content-start gap-5">
          <Act
            title="Sign-in link"
            words={linkWords ?? 'For someone who has no password yet, or has lost it. Links that were made before stop working.'}
            button={
              <Button
                busy={createLink.isPending && 'Making it'}
                onClick={() => createLink.mutate(person.id, { onSuccess: ({ link }) => onLink({ name: person.name, ...link }) })}
              >
                {person.status === 'invited' ? 'Make a new link' : 'Make a password link'}
              </Button>
            }
          />
          <Act
            title={isActive ? 'Leaves the shop' : 'Comes back'}
            words={
              isActive
                ? 'Signs out everywhere at once and cannot sign in. Walks and findings stay.'
                : 'Can sign in again with the password of before, or with a new link.'
            }
            button={
              <Button look={isActive ? 'danger' : 'quiet'} busy={update.isPending && 'Saving'} onClick={() => change({ isActive: !isActive }, { isActive })}>
                {isActive ? 'Deactivate' : 'Activate'}
              </Button>
            }
          />
        </div>
      </div>
    </div>
  )
}

function Act({ title, words, button }: { readonly title: string; readonly words: string; readonly button: ReactNode }) {
  return (
    <section className="border-t border-hair pt-3">
      <h3 className="label">{title}</h3>
      <p className="mt-1 mb-3 text-small text-ink-2">{words}</p>
      {button}
    </section>
  )
}
