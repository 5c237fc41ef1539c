import { zodResolver } from '@hookform/resolvers/zod'
import type { DefaultValues, FieldValues, Path, UseFormReturn } from 'react-hook-form'
import { useForm } from 'react-hook-form'
import type { z } from 'zod'

import { ProblemError } from '#src/lib/api-client.ts'
import { toWords } from '#src/lib/problem-words.ts'

export type ZodForm<Input extends FieldValues, Output extends FieldValues> = UseFormReturn<Input, unknown, Output> & {
  /** Gives a refusal back to its fields; what belongs to none stands at `errors.root`. */
  readonly showProblem: (error: unknown) => void
}

/** A form over a contract's schema: judged when it is sent, then with every change. */
export function useZodForm<Input extends FieldValues, Output extends FieldValues>(
  schema: z.ZodType<Output, Input>,
  defaultValues: DefaultValues<Input>,
): ZodForm<Input, Output> {
  const form = useForm<Input, unknown, Output>({
    resolver: zodResolver(schema),
    defaultValues,
    mode: 'onSubmit',
    reValidateMode: 'onChange',
  })
  const showProblem = (error: unknown): void => {
    const problem = error instanceof ProblemError ? error : null
    const names = Object.keys(form.getValues())
    const forFields = (problem?.errors ?? []).filter(({ pointer }) => names.includes(toFieldName(pointer).split('.')[0] ?? ''))
    forFields.forEach(({ pointer, detail }, index) => {
      // The names were just compared with those of the form.
      form.setError(toFieldName(pointer) as Path<Input>, { type: 'server', message: detail }, { shouldFocus: index === 0 })
    })
    if (forFields.length === 0) form.setError('root', { type: 'server', message: toWords(error) })
  }
  return { ...form, showProblem }
}

/** '#/parts/0/title' or '/parts/0/title' -> 'parts.0.title'. */
export function toFieldName(pointer: string): string {
  return pointer
    .replace(/^#?\//, '')
    .split('/')
    .map((step) => decodeURIComponent(step).replaceAll('~1', '/').replaceAll('~0', '~'))
    .join('.')
}
