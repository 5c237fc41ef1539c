/** What a folder may import from the project, and which packages are at home in it. */
export type Row = {
  /** A folder, or one file; the longest that matches a file is its row. */
  readonly place: string
  readonly may: readonly string[]
  readonly packages: readonly string[]
  /** Why a row differs from its neighbours. */
  readonly because?: string
}

const core = ['zod']
const page = ['react', 'react-dom', 'react-router-dom', '@tanstack/react-query', 'zod']
const form = ['react-hook-form', '@hookform/resolvers']
const controls = ['react-aria-components', 'lucide-react', '@tanstack/react-table']
const belowRoutes = ['src/routes', 'src/features', 'src/api', 'src/components', 'src/lib', 'src/styles', 'shared/']

/** The import law: arrows point down only. A folder that is not listed fails; so does a package that is not at home where it is used. */
export const law: readonly Row[] = [
  { place: 'shared/lib', may: [], packages: core },
  { place: 'shared/trade', may: ['shared/lib'], packages: core },
  { place: 'shared/units', may: ['shared/lib'], packages: core },
  { place: 'shared/money', may: ['shared/lib'], packages: core },
  { place: 'shared/stats', may: ['shared/lib'], packages: core },
  { place: 'shared/chart', may: ['shared/lib', 'shared/trade', 'shared/units'], packages: [...core, 'dagre', 'papaparse'] },
  { place: 'shared/walk', may: ['shared/chart', 'shared/lib', 'shared/trade', 'shared/units'], packages: core },
  { place: 'shared/engine', may: ['shared/chart', 'shared/stats', 'shared/lib', 'shared/trade', 'shared/units', 'shared/money'], packages: core, because: 'never walk: it is handed findings and counts' },
  { place: 'shared/plots', may: ['shared/chart', 'shared/stats', 'shared/lib', 'shared/trade', 'shared/units'], packages: [...core, 'd3-scale', 'd3-shape', 'd3-array'] },
  { place: 'shared/api', may: ['shared/'], packages: core },

  { place: 'server/lib', may: ['shared/'], packages: ['zod', 'pino'] },
  { place: 'server/lib/deps.ts', may: ['server/db', 'server/adapters', 'shared/', 'server/lib'], packages: [], because: 'it lists, by type alone, what services are handed' },
  { place: 'server/db', may: ['shared/', 'server/lib'], packages: ['zod', 'drizzle-orm', 'pg', '@electric-sql/pglite'] },
  { place: 'server/adapters', may: ['shared/', 'server/lib'], packages: ['zod', 'bcryptjs', 'nodemailer', 'stripe', 'sharp', 'pdfkit'] },
  { place: 'server/services', may: ['server/db', 'server/adapters', 'server/lib', 'shared/'], packages: ['zod', 'drizzle-orm', 'bcryptjs'] },
  { place: 'server/http', may: ['server/services', 'server/lib', 'shared/'], packages: ['zod', 'express', 'helmet', 'jose', 'cookie-parser'] },
  { place: 'server/routes', may: ['server/http', 'server/services', 'server/lib', 'shared/'], packages: ['zod', 'express'] },
  { place: 'server', may: ['server/', 'shared/', 'seeds-demo/'], packages: ['express', 'cookie-parser', 'vite', 'zod'], because: 'main, app and the command line put everything together' },

  { place: 'src/lib', may: ['shared/'], packages: [...page, ...form, 'idb'] },
  { place: 'src/styles', may: [], packages: ['@fontsource/ibm-plex-sans', '@fontsource/ibm-plex-mono', '@fontsource/ibm-plex-sans-condensed'] },
  { place: 'src/api', may: ['src/lib', 'shared/'], packages: page },
  { place: 'src/components', may: ['src/lib', 'shared/'], packages: [...page, ...form, ...controls], because: 'never src/api: components get data as props' },
  { place: 'src/components/chart-canvas', may: ['src/components', 'src/lib', 'shared/'], packages: [...page, ...controls, '@xyflow/react'] },
  { place: 'src/features', may: ['src/api', 'src/components', 'src/lib', 'shared/'], packages: [...page, ...form, ...controls], because: 'never another feature' },
  { place: 'src/routes', may: belowRoutes, packages: [...page, ...form, ...controls] },
  { place: 'src', may: ['src/', 'shared/'], packages: page },

  { place: 'seeds-demo', may: ['shared/', 'server/services', 'server/lib/deps.ts'], packages: ['zod'] },
]

/** Packages that any test may use, beside those of its place. */
export const testPackages = ['vitest', 'fast-check', '@testing-library/', 'jsdom', 'playwright-core', '@axe-core/playwright']
