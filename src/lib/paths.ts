import type { ChartId, NodeId, PersonId, WalkId } from '#shared/lib/ids.ts'

const part = encodeURIComponent

type WalkListQuery = { readonly scope?: 'mine' | 'shop'; readonly state?: 'open' | 'ended' | 'all'; readonly page?: number }

function toQuery(query: Readonly<Record<string, string | number | undefined>>): string {
  const pairs = Object.entries(query).flatMap(([name, value]) => (value === undefined ? [] : [`${name}=${part(value)}`]))
  return pairs.length === 0 ? '' : `?${pairs.join('&')}`
}

/** Every address of the screens and of the API is made here, so that a changed one changes once. */
export const paths = {
  bench: () => '/',
  /** `at` names the start where a chart has several. */
  startWalk: (chartId: ChartId, at?: NodeId) => `/start/${part(chartId)}${toQuery({ at })}`,
  walk: (walkId: WalkId) => `/walks/${part(walkId)}`,
  walkReview: (walkId: WalkId) => `/walks/${part(walkId)}/review`,
  walks: () => '/walks',
  charts: () => '/charts',
  chart: (chartId: ChartId) => `/charts/${part(chartId)}`,
  people: () => '/people',
  account: () => '/account',
  signIn: (next?: string) => (next === undefined || next === '/' ? '/sign-in' : `/sign-in?next=${part(next)}`),
  setUp: () => '/set-up',
  link: (token: string) => `/link/${part(token)}`,

  api: {
    session: () => '/api/session',
    ownPassword: () => '/api/session/password',
    ownSessions: () => '/api/sessions',
    ownSession: (id: string) => `/api/sessions/${part(id)}`,
    owner: () => '/api/owner',
    people: () => '/api/people',
    activePeople: () => '/api/people/active',
    person: (personId: PersonId) => `/api/people/${part(personId)}`,
    personLink: (personId: PersonId) => `/api/people/${part(personId)}/link`,
    link: (token: string) => `/api/links/${part(token)}`,
    charts: () => '/api/charts',
    chartVersion: (chartId: ChartId, version: number) => `/api/charts/${part(chartId)}/versions/${version}`,
    chartReach: (chartId: ChartId) => `/api/charts/${part(chartId)}/reach`,
    symptoms: (words: string) => (words === '' ? '/api/symptoms' : `/api/symptoms?q=${part(words)}`),
    models: () => '/api/models',
    causes: () => '/api/causes',
    walks: (query: WalkListQuery = {}) => `/api/walks${toQuery(query)}`,
    walk: (walkId: WalkId) => `/api/walks/${part(walkId)}`,
    walkEvents: (walkId: WalkId) => `/api/walks/${part(walkId)}/events`,
    walkSideEvents: (walkId: WalkId) => `/api/walks/${part(walkId)}/side-events`,
  },
} as const

/** Where to go after sign-in: only a path of ours, never another address that a link brought along. */
export function toLocalPath(next: string | null): string {
  return next !== null && /^\/(?![/\\])/.test(next) ? next : paths.bench()
}
