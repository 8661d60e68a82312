import { millisecondsInMinute, millisecondsInSecond } from 'date-fns/constants'

/** Two filters that overlap bring one message twice, at once. */
const AT_ONCE_MS = 2 * millisecondsInSecond
/** How long after its first try a broker may send again what was not acknowledged. */
const SENT_AGAIN_MS = 15 * millisecondsInMinute
const MOST_TOPICS = 500
const MOST_OF_A_TOPIC = 20

export type Repeats = {
  /** Whether these very words were on this topic already. `isSentAgain`: the broker says that it sends them another time. */
  isRepeat: (message: { topic: string; sha256: string; arrivedAt: number; isSentAgain: boolean }) => boolean
  note: (message: { topic: string; sha256: string; arrivedAt: number }) => void
}

/** Remembers the last messages of each topic, a bounded number: only by them can a message without a time be known again. */
export function rememberRepeats(): Repeats {
  const known = new Map<string, { sha256: string; arrivedAt: number }[]>()
  return {
    isRepeat: ({ topic, sha256, arrivedAt, isSentAgain }) =>
      (known.get(topic) ?? []).some(
        (former) => former.sha256 === sha256 && Math.abs(arrivedAt - former.arrivedAt) <= (isSentAgain ? SENT_AGAIN_MS : AT_ONCE_MS),
      ),
    note: ({ topic, sha256, arrivedAt }) => {
      const former = known.get(topic) ?? []
      // Put in again, so that the topic that was silent longest is the first to be forgotten.
      known.delete(topic)
      known.set(topic, [...former, { sha256, arrivedAt }].slice(-MOST_OF_A_TOPIC))
      const oldest = known.keys().next()
      if (known.size > MOST_TOPICS && !oldest.done) known.delete(oldest.value)
    },
  }
}
