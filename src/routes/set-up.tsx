import { useNavigate } from 'react-router-dom'

import { QuietPage } from '#src/components/layout/quiet-page.tsx'
import { HowAWalkGoes } from '#src/features/account/how-a-walk-goes.tsx'
import { SetUpForm } from '#src/features/account/set-up-form.tsx'
import { paths } from '#src/lib/paths.ts'

export function Component() {
  const navigate = useNavigate()
  return (
    <QuietPage over="A new shop" title="Become its owner" beside={<HowAWalkGoes />}>
      <SetUpForm onDone={() => void navigate(paths.bench(), { replace: true })} />
    </QuietPage>
  )
}
