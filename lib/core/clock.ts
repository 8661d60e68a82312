/** Where the present comes from. Queries, commands and jobs take one, so that a test can hold it still. */
export type Clock = { now: () => number }

export const systemClock: Clock = { now: () => Date.now() }
