import type { z } from 'zod'

import type { listSessions } from '#shared/api/session.ts'
import { useEndSession } from '#src/api/session.ts'
import { Button } from '#src/components/ui/button.tsx'
import { Notice } from '#src/components/ui/notice.tsx'
import { RuledTable } from '#src/components/ui/ruled.tsx'
import { StateMark } from '#src/components/ui/state-mark.tsx'
import { announce } from '#src/lib/announce.ts'
import { formatMoment, formatSince } from '#src/lib/format.ts'
import { toWords } from '#src/lib/problem-words.ts'

type OwnSession = z.infer<typeof listSessions.response>['sessions'][number]

/** Where this person is signed in; any but this one can be ended here. */
export function SessionList({ sessions }: { readonly sessions: readonly OwnSession[] }) {
  const { mutate, error, isPending, variables } = useEndSession()
  return (
    <>
      {error !== null && (
        <Notice state="bad" role="alert" title="Still signed in there" className="my-3">
          {toWords(error)}
        </Notice>
      )}
      <RuledTable
        caption="Where you are signed in"
        rows={sessions}
        rowKey={({ id }) => id}
        columns={[
          { key: 'browser', head: 'Browser', isRowHead: true, cell: ({ browser }) => browser },
          { key: 'started', head: 'Signed in', cell: ({ startedAt }) => formatMoment(startedAt) },
          {
            key: 'seen',
            head: 'Last seen',
            cell: ({ isThisOne, lastSeenAt }) => (isThisOne ? <StateMark state="good">this one, now</StateMark> : formatSince(lastSeenAt)),
          },
          {
            key: 'acts',
            head: 'Acts',
            hidden: true,
            align: 'right',
            cell: ({ id, isThisOne, browser }) =>
              isThisOne ? null : (
                <Button
                  busy={isPending && variables === id && 'Signing out'}
                  onClick={() => mutate(id, { onSuccess: () => announce(`Signed out on ${browser}.`) })}
                >
                  Sign out there
                </Button>
              ),
          },
        ]}
      />
    </>
  )
}
