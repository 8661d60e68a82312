/** What is written down of a push that the service refused for our keys, our contact or our clock. */
const KEYS_REFUSED = 'The push service does not accept the keys of this server.'
const MESSAGE_REFUSED = /^The push service refused the message \(400\)\.$/

/**
 * Words for a refusal that sending again would not mend, by the service's status.
 *
 * @example refusalWords(403) // => 'The push service does not accept the keys of this server.'
 */
export function refusalWords(status: number): string {
  return status === 401 || status === 403 ? KEYS_REFUSED : `The push service refused the message (${status}).`
}

/** Whether the words of a failed push say that a service refuses us and not the device: 400, 401 or 403. */
export function isRefusalOfUs(words: string | null): boolean {
  return words !== null && (words === KEYS_REFUSED || MESSAGE_REFUSED.test(words))
}

/** A push that came to an end, one way or the other. */
export type SettledPush = { host: string; at: number; isRefusal: boolean }

/** So many in a row are no accident. */
const IN_A_ROW = 3

/**
 * Push services that refuse us by now, each with the first refusal of its present row.
 *
 * @param settled pushes in any order.
 */
export function refusingServices(settled: readonly SettledPush[]): { host: string; since: number }[] {
  const hosts = [...new Set(settled.map(({ host }) => host))].toSorted()
  return hosts.flatMap((host) => {
    const newestFirst = settled.filter((push) => push.host === host).toSorted((one, other) => other.at - one.at)
    const end = newestFirst.findIndex(({ isRefusal }) => !isRefusal)
    const row = end === -1 ? newestFirst : newestFirst.slice(0, end)
    return row.length < IN_A_ROW ? [] : [{ host, since: row.at(-1)!.at }]
  })
}
