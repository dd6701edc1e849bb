/** The tuner: from a microphone's samples to words for the string being tuned. */
export { detectPitch, windowFor, type Heard } from './detect'
export { centsBetween, follow, NOTHING_HEARD, type Followed, type Pitch } from './follow'
export { awaitPluck, levelOf, type Quiet } from './onset'
export { approachOf, FROM_ABOVE, type Approach } from './approach'
export { A4, IN_TUNE, judge, noteAt, readA4, type Aim, type Verdict } from './verdict'
export { shown, singleStages, stagesOf, type Stage } from './stages'
