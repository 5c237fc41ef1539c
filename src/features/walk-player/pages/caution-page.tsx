import { signalWords } from '#shared/trade/signal-words.ts'
import type { CautionPage as Page, CautionWords } from '#shared/walk/page.ts'
import { PageHeading } from '#src/components/layout/page-heading.tsx'
import { Button } from '#src/components/ui/button.tsx'
import { CautionPanel, CautionPart } from '#src/components/ui/caution-panel.tsx'
import { usePlayer } from '#src/features/walk-player/player-context.ts'
import { cautionMs, useIsAwake, useTapGuard } from '#src/features/walk-player/tap-guard.ts'
import { toTitleWord } from '#src/features/walk-player/words.ts'

/**
 * All cautions that wait, on one page under the highest word. "Read it" stands where no outcome was and takes no tap for 600 ms,
 * so that neither a hurried thumb nor a drop of water reads it.
 */
export function CautionPage({ page }: { readonly page: Page }) {
  const { record, pageKey, machineTitle } = usePlayer()
  const tap = useTapGuard(pageKey, cautionMs)
  const isAwake = useIsAwake(pageKey, cautionMs)
  const highest = page.cautions.filter(({ word }) => word === page.word)
  const lower = signalWords.flatMap((word) => (word === page.word ? [] : page.cautions.filter((caution) => caution.word === word)))
  const read = (): void => {
    record([{ type: 'caution-acknowledged', payload: { node: page.guards.place, cautionIds: [...page.cautionIds] } }])
  }
  return (
    <div className="flex grow flex-col pt-4 pb-4 md:pt-6">
      <div className="max-w-[60rem]">
        <PageHeading tab={`${toTitleWord(page.word)} · ${machineTitle}`} focusKey={pageKey} className="for-ears">
          {toTitleWord(page.word)}, read before you go on
        </PageHeading>
        <CautionPanel word={page.word}>
          <div className="grid gap-5">
            {highest.map((caution) => (
              <FullCaution key={caution.cautionId} caution={caution} />
            ))}
          </div>
          {lower.length > 0 && (
            <ul role="list" className="mt-4 grid gap-x-6 gap-y-3 border-t border-hair pt-3 sm:grid-cols-2 lg:grid-cols-3">
              {lower.map((caution) => (
                <li key={caution.cautionId} className="text-small">
                  <p className="label text-ink!">{caution.word}</p>
                  <p className="font-medium">{caution.hazard}</p>
                  <p>{caution.avoid}</p>
                </li>
              ))}
            </ul>
          )}
        </CautionPanel>
      </div>
      <div className="mt-auto flex flex-wrap items-center justify-end gap-x-6 gap-y-3 pt-4 md:pt-8">
        <p className="min-w-0 flex-1 basis-32 text-small leading-5 text-ink-2">The maker’s manual, local codes and licensed practice come first.</p>
        <Button
          look="primary"
          size="large"
          aria-disabled={!isAwake}
          onClick={() => tap(read)}
          className="min-h-18 min-w-44 text-[1.25rem] md:min-h-22 md:min-w-64"
        >
          Read it
        </Button>
      </div>
    </div>
  )
}

function FullCaution({ caution }: { readonly caution: CautionWords }) {
  return (
    <div>
      <CautionPart lead="What can happen" strong>
        {caution.hazard}
      </CautionPart>
      {caution.consequence !== null && <CautionPart lead="Then">{caution.consequence}</CautionPart>}
      <CautionPart lead="So">{caution.avoid}</CautionPart>
    </div>
  )
}
