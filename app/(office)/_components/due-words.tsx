import { TimePair } from '@/app/_components/time-pair'
import { formatMoment } from '@/lib/format/local-time'
import type { QueueTree } from '@/lib/queue/contract'
import { nextDipWords } from '@/lib/trees/tree-verdict'

export type Moment = { now: number; timeZone: string }

/** Said wherever a promised time rests on starting values that nobody has checked. */
export const NOT_CALIBRATED = 'not calibrated yet'

/** When a tree's next act is due: its pair of times while it dries, else since when it waits, or what it waits for. */
export function DueWords({ tree, now, timeZone }: { tree: QueueTree } & Moment) {
  const since = tree.stateSince === null ? null : formatMoment(tree.stateSince, now, timeZone)
  switch (tree.state) {
    case 'wet':
    case 'drying':
    case 'nearly dry':
    case 'last coat on':
      if (tree.dry === null) return <span className="text-soot">no time in sight</span>
      return (
        <>
          <TimePair pair={tree.dry} now={now} timeZone={timeZone} guard={tree.state === 'last coat on' ? 'safe' : tree.guard} />
          {tree.isUncalibrated && <span className="block text-14 text-soot">{NOT_CALIBRATED}</span>}
        </>
      )
    case 'overdue':
    case 'dip now':
    case 'waiting':
    case 'wax ready':
      return <>{tree.next === null ? '' : nextDipWords(tree.next)}</>
    case 'unknown':
      return <>no reading: confirm by touch, weight or temperature</>
    case 'bare wax':
      return <>intake open</>
    case 'held':
      return <>{tree.hold?.reason}</>
    case 'dried out':
    case 'ready for burnout':
    case 'released':
    case 'scrapped':
      return <span className="text-soot">{since === null ? '' : `since ${since}`}</span>
  }
}
