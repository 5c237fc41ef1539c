/** Kinds of node; outlines follow ISO 5807 (terminator, process, decision, off-page connector, predefined process). */
export const nodeKinds = ['start', 'step', 'check', 'reading', 'proof', 'cause', 'jump', 'escalate', 'hold', 'back'] as const
/** One of the closed list of node kinds. */
export type NodeKind = (typeof nodeKinds)[number]

/** Grades of how common a cause is; weights 1 / 3 / 9 in the fault model. A cause without one is occasional. */
export const causeGrades = ['rare', 'occasional', 'common'] as const
/** One of the three grades of a cause. */
export type CauseGrade = (typeof causeGrades)[number]

/** Grades of how often a cause shows an outcome: .01, .1, .5, .9, .99 in the fault model. */
export const likelihoodGrades = ['never', 'seldom', 'even', 'mostly', 'nearly-always'] as const
/** One of the five grades of a likelihood. */
export type LikelihoodGrade = (typeof likelihoodGrades)[number]
