import { millisecondsInMinute } from 'date-fns/constants'

/** For this long the person who logged a dip may take it back without giving a reason. */
export const UNDO_MS = 10 * millisecondsInMinute
