/** How much a remark weighs: an error stops publishing, a warning asks for a word, a note stands by the way. */
export const severities = ['error', 'warning', 'note'] as const
/** One of the three severities. */
export type Severity = (typeof severities)[number]

/** What the bench and the chart desk read for a severity. */
export const severityWords: Readonly<Record<Severity, string>> = { error: 'must fix', warning: 'worth a look', note: 'by the way' }

/** Every remark that the chart check can make, with its severity. A code is never renamed and never reused. */
export const remarkCodes = {
  // Routes
  'no-start': 'error',
  'unreachable-node': 'error',
  'outcome-without-edge': 'error',
  'node-without-edge': 'error',
  'edge-to-nothing': 'error',
  'edge-from-nothing': 'error',
  'second-edge': 'error',
  'no-end-reachable': 'error',
  'edge-out-of-end': 'warning',
  'only-for-without-way': 'error',
  'silent-ring': 'error',
  // Names
  'duplicate-id': 'error',
  'duplicate-outcome': 'error',
  'unknown-access': 'error',
  'unknown-caution': 'error',
  'unknown-cause': 'error',
  'unknown-service-item': 'error',
  'unknown-spec-key': 'error',
  'unknown-node': 'error',
  'unknown-outcome': 'error',
  'unknown-safety-part': 'warning',
  // Outcomes
  'outcome-count': 'error',
  'many-outcomes': 'warning',
  'outcome-titles-alike': 'warning',
  'same-check-other-outcomes': 'error',
  // Readings
  'bands-overlap': 'error',
  'bands-gap': 'error',
  'bands-undecided': 'warning',
  'unit-mismatch': 'error',
  'limits-inverted': 'warning',
  // Access
  'access-ring': 'error',
  'needs-clash': 'error',
  'unused-access': 'warning',
  'access-defined-otherwise': 'warning',
  // Jumps
  'jump-without-target': 'error',
  'jump-node-missing': 'error',
  'jump-chart-missing': 'warning',
  'jump-chart-not-beside': 'note',
  'one-way-jump-with-edge': 'error',
  'returning-jump-without-edge': 'error',
  'returning-jump-without-back': 'error',
  'returning-ring': 'error',
  // Safety
  'defeated-never-restored': 'error',
  'word-contradicts-harm': 'error',
  'running-without-caution': 'warning',
  // Proofs and causes
  'proof-without-suspect': 'error',
  'proof-confirming-outcomes': 'error',
  'proof-compares-wrongly': 'error',
  'proof-without-access': 'note',
  'cause-without-proof': 'warning',
  'cause-without-remedy': 'warning',
  // Starts
  'start-without-reproducing-check': 'warning',
  'start-with-several-reproducing-checks': 'warning',
  'nothing-reproduced': 'warning',
  'all-good-route': 'warning',
  // Wording
  'title-missing': 'warning',
  'step-too-long': 'warning',
  'outcome-title-too-long': 'warning',
  'outcome-says-nothing': 'warning',
  'vague-value': 'warning',
  'plus-minus': 'warning',
  'and-with-or': 'warning',
  'value-torn-from-unit': 'warning',
} as const satisfies Readonly<Record<string, Severity>>
/** One of the codes of the chart check. */
export type RemarkCode = keyof typeof remarkCodes
