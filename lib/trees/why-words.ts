import { formatDuration } from '@/lib/format/duration'
import { formatMoment } from '@/lib/format/local-time'
import type { CoatEvidence } from '@/lib/trees/detail-contract'
import { evidenceWords } from '@/lib/trees/evidence-words'
import type { Why } from '@/lib/trees/why'

/** A shift smaller than this is nothing to explain. */
const LEAST_SHIFT_MS = 60_000

/** A shift of the likely time: '40 min later', '25 min sooner', 'not moved'. */
export function shiftWords(shiftMs: number): string {
  if (Math.abs(shiftMs) < LEAST_SHIFT_MS) return 'not moved'
  return `${formatDuration(Math.abs(shiftMs))} ${shiftMs > 0 ? 'later' : 'sooner'}`
}

type Said = Pick<CoatEvidence, 'id' | 'by' | 'at' | 'kind' | 'spot' | 'verdict' | 'moment' | 'massKg' | 'surfaceTempC' | 'airTempC'>

/**
 * Why the newest coat's time stands where it does, in one sentence: by the piece that moved it most, or by the tree's earlier coats.
 *
 * @example whyWords(why, evidence, { now, timeZone }) // => 'Maud, 13:10, felt in the recess: not yet. That alone makes it 40 min later.'
 */
export function whyWords(why: Why, evidence: readonly Said[], { now, timeZone }: { now: number; timeZone: string }): string {
  const moved = why.pieces
    .flatMap((piece) => {
      const said = evidence.find(({ id }) => id === piece.evidenceId)
      return said && piece.shiftMs !== null && Math.abs(piece.shiftMs) >= LEAST_SHIFT_MS ? [{ said, shiftMs: piece.shiftMs }] : []
    })
    .toSorted((a, b) => Math.abs(b.shiftMs) - Math.abs(a.shiftMs))
  const [most] = moved
  const total = why.byClock.likelyAt === null || why.asTold.likelyAt === null ? null : why.asTold.likelyAt - why.byClock.likelyAt
  const all = total === null || moved.length < 2 ? '' : ` Together with the rest: ${shiftWords(total)} than by the clock alone.`
  if (most) {
    const { said } = most
    return `${said.by}, ${formatMoment(said.at, now, timeZone)}, ${evidenceWords(said)}. That alone makes it ${shiftWords(most.shiftMs)}.${all}`
  }
  const fromEarlier = why.fromEarlierCoatsMs
  if (fromEarlier !== null && Math.abs(fromEarlier) >= LEAST_SHIFT_MS) {
    return `The coats below it took ${fromEarlier > 0 ? 'longer' : 'less time'} than the clock said: ${shiftWords(fromEarlier)}.`
  }
  return 'What was noted agrees with the clock: the time is surer now, and stands where it stood.'
}
