/**
 * Every reason for which an event is refused, with the words for the person who tapped it: what happened, what is safe, what to do.
 * Codes are stored beside events that did not make it into a log; they are never renamed.
 */
export const refusalWords = {
  // The event itself
  malformed: 'This entry is not complete. Nothing was lost. Look at the field that is named and enter it again.',
  'note-too-long': 'A note holds at most 10 kB. Shorten it, or split it into two notes.',
  'wrong-walk': 'This entry belongs to another walk. Nothing was changed here. Open its own walk.',
  'wrong-seq': 'This entry does not follow the last one. Nothing was lost. Load the walk again and go on from there.',
  'already-started': 'This walk was started already. Open it and go on.',
  'not-started': 'A walk begins with its start. Start it, then go on.',
  'walk-ended': 'This walk has ended and takes no more entries. Start a new one for this machine.',
  paused: 'The walk is paused. Resume it, then go on.',
  'wrong-phase': 'The walk is not at the point for this. Load it again to see where it stands.',

  // Who may
  'not-you': 'This entry names somebody else. Sign in as the person who made it, and send it again.',
  'other-device': 'The walk is in hand on another device. Your entry is kept beside it. Take the walk over to go on here.',
  'other-person': 'This walk is in the hands of somebody else. Have it handed over, or ask the lead.',
  'not-handed-to-you': 'Only the person to whom it was handed over, or a lead, can take this walk.',
  'not-the-holder': 'The walk is in other hands than this entry says. Load it again.',
  'to-yourself': 'The walk is in your hands already.',
  'lead-only': 'This takes a lead or the owner.',

  // The start
  'no-such-version': 'A chart that this walk names is not there in this version. Start again from the list of symptoms.',
  'no-such-start': 'The chart has no such start. Start again from the list of symptoms.',
  'pins-moved': 'A chart of this walk is fixed to another version. Go on with the version that it began with.',

  // Where the walk stands
  'wrong-node': 'The walk has left this check. Your entry was not recorded. Load the walk again to see where it stands.',
  'not-a-step': 'This is not a step. Answer it.',
  'not-a-check': 'There is nothing to answer here.',
  'not-a-pick': 'No symptom is asked for here.',
  'cautions-pending': 'A caution has to be read first.',
  'not-the-pending-cautions': 'The cautions that wait here are others. Load the walk again and read those.',
  'not-on-trail': 'That entry is not on the trail any more. Step back to one that is.',
  'no-such-node': 'The charts of this walk have no such node.',

  // Findings
  'no-such-outcome': 'The check has no such outcome. Pick one of those on the page.',
  'value-missing': 'Enter the value that you measured.',
  'value-not-asked': 'This check asks for no value. Pick an outcome, and put the value in a note.',
  'value-not-last': 'The last value is the one that counts. Enter it once more.',
  'unit-missing': 'Say in which unit you measured.',
  'wrong-unit': 'This unit does not fit what is measured. Pick one of those on the page.',
  'not-the-band': 'The value belongs to another outcome. Record the one that the limits give.',
  'limits-unknown': 'Nobody knows the limits for this machine. Judge the value yourself.',
  'was-so-before': 'It was so before the change already: the value proves nothing. Judge yourself what the change did.',
  'nothing-to-judge': 'Limits say nothing about this outcome. Pick it yourself.',
  'other-limits': 'The limits in force are others. Load the walk again and record the value once more.',
  'not-equal-yet': 'The values are not equal yet. Measure again, or say that it never settles.',
  'too-many-values': 'That is more values than this reading takes.',
  'before-missing': 'Take the reading before the change first.',
  'before-not-asked': 'This proof compares with nothing.',
  'note-missing': 'Write what the second look showed.',
  'not-offered': 'That answer is not on offer here. Answer the check anew.',

  // Out of turn
  'not-on-stack': 'The walk is not in the chart of this check.',
  'stands-here': 'The walk stands at this check. Record it as its finding.',
  'only-in-turn': 'This can only be done when the walk comes to it.',
  'already-found': 'This check has its finding. Step back to it to answer it anew.',
  'not-for-this-machine': 'This check is for other machines.',
  'access-not-open': 'What this check needs is not open. Open it first.',
  'access-in-the-way': 'Something is open that has to be closed first.',
  'wrong-machine-state': 'The engine has to be in the other state for this: look at the page.',
  'no-such-access': 'The charts of this walk know no such access.',
  'already-open': 'This is open already.',
  'not-open': 'This is not open.',
  'needs-not-open': 'What this needs is not open. Open that first.',
  'nothing-to-change': 'Nothing was opened or closed.',
  'excluded-open': 'Something is open that can not stay open with this. Close it first.',

  // Cause, repair, run
  'not-that-cause': 'The walk is at another cause.',
  'no-such-cause': 'The charts of this walk know no such cause.',
  'already-ruled-out': 'This cause was ruled out in this walk.',
  'no-proof-in-reach': 'No proof of this suspect is in reach from here.',
  'proof-or-sight': 'Name the proof, or write what the second look showed: one of the two.',
  'not-a-proof': 'That finding does not prove this cause.',
  'no-such-service-item': 'The service list has no such item.',
  'no-such-item': 'This list has no such item.',
  'list-closed': 'This list is not open now.',
  'run-incomplete': 'Every item of the run is done and answered, each once.',
  'run-not-ok': 'An item failed. Record the run as failed.',
  'nothing-failed': 'No item failed. Record the run as passed.',
  'run-out-of-limits': 'This value is out of limits. It can not count as in order.',
  'unsafe-hold-only': 'This machine is not safe. It can only be held: tag it.',
  'wrong-result': 'The walk can not end with this result from where it stands.',

  // Talk
  'question-exists': 'This question was asked already.',
  'no-such-question': 'There is no such open question.',
  'free-only': 'This is for free walks alone.',
} as const

/** A reason for which an event is refused. */
export type RefusalCode = keyof typeof refusalWords

/** Why an event was not taken. */
export interface Refusal {
  readonly code: RefusalCode
  /** The field at fault as a JSON pointer into the event, where there is one. */
  readonly field: string | null
  /** The reason in words. */
  readonly detail: string
}

/** A refusal with the words of its code. */
export function refuse(code: RefusalCode, field: string | null = null, detail: string = refusalWords[code]): Refusal {
  return { code, field, detail }
}
