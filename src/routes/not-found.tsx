import { QuietPage } from '#src/components/layout/quiet-page.tsx'
import { TextLink } from '#src/components/ui/text-link.tsx'
import { paths } from '#src/lib/paths.ts'

export function NotFound() {
  return (
    <QuietPage over="Pullcord" title="There is no such page" knot="hold">
      <p className="max-w-words">The address may be cut short, or what it named is gone. Nothing was lost.</p>
      <p className="mt-6">
        <TextLink to={paths.bench()}>To the bench</TextLink>
      </p>
    </QuietPage>
  )
}
