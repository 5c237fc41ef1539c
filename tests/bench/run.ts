// npm run bench: speeds as ratios to a reference measured in the same run, and sizes beside their limits. A figure that misses its goal is
// said in words; only what cannot be measured fails.
import { measureBundles } from './bundles.ts'
import { measureChartCheck } from './chart-check.ts'
import { measureEventPost } from './event-post.ts'
import { toLine } from './report.ts'

for (const measure of [measureBundles, () => [measureChartCheck()], async () => [await measureEventPost()]]) {
  for (const measured of await measure()) process.stdout.write(`${toLine(measured)}\n`)
}
