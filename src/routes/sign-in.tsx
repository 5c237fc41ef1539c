import { useNavigate, useSearchParams } from 'react-router-dom'

import { useSession } from '#src/api/session.ts'
import { DemoBanner } from '#src/components/layout/demo-banner.tsx'
import { QuietPage } from '#src/components/layout/quiet-page.tsx'
import { HowAWalkGoes } from '#src/features/account/how-a-walk-goes.tsx'
import { SignInForm } from '#src/features/account/sign-in-form.tsx'
import { toLocalPath } from '#src/lib/paths.ts'

export function Component() {
  const [search] = useSearchParams()
  const navigate = useNavigate()
  const session = useSession().data
  const demoSignIns = session?.demoSignIns ?? []
  return (
    <QuietPage over={session?.shop.name ?? 'Pullcord'} title="Sign in" beside={<HowAWalkGoes />} banner={demoSignIns.length > 0 && <DemoBanner />}>
      <SignInForm demoSignIns={demoSignIns} onSignedIn={() => void navigate(toLocalPath(search.get('next')), { replace: true })} />
    </QuietPage>
  )
}
