import { timePairWords, type PairTime } from '@/lib/format/time-pair'
import type { Guard } from '@/lib/coats/vocabulary'

export type TimePairProps = {
  pair: { likelyAt: number | null; safeAt: number | null }
  now: number
  timeZone: string
  /** The time that lets the next act happen is set large, the other beside it. */
  guard?: Guard | null
  className?: string
}

function OneTime({ time, isLarge }: { time: PairTime; isLarge: boolean }) {
  return (
    <span className="whitespace-nowrap">
      {time.word} {time.day !== '' && `${time.day} `}
      <span className={isLarge ? 'num text-[1.35em]' : 'num'}>{time.clock}</span>
    </span>
  )
}

/** The two promised times, never one alone: 'likely Wed 22:00, safe Thu 02:00'. */
export function TimePair({ pair, now, timeZone, guard = null, className = '' }: TimePairProps) {
  const { likely, safe } = timePairWords(pair, now, timeZone)
  return (
    <span className={className}>
      <OneTime time={likely} isLarge={guard === 'likely'} />, <OneTime time={safe} isLarge={guard === 'safe'} />
    </span>
  )
}
