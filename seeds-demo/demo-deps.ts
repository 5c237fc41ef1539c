import type { createShop } from '#server/services/shop.ts'

/** What services are handed. */
export type Deps = Parameters<typeof createShop>[1]
