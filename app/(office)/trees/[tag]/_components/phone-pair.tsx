import { formatDuration } from '@/lib/format/duration'
import { timePairWords } from '@/lib/format/time-pair'
import type { Moment } from '@/app/(office)/_components/due-words'

/** The two promised times as large as a phone allows, each with how far off it is. */
export function PhonePair({
  lead,
  pair,
  note,
  now,
  timeZone,
}: { lead: string; pair: { likelyAt: number | null; safeAt: number | null }; note: string | null } & Moment) {
  const words = timePairWords(pair, now, timeZone)
  const times = [
    { time: words.likely, at: pair.likelyAt },
    { time: words.safe, at: pair.safeAt },
  ]
  return (
    <div className="phone-pair" role="group" aria-label={`${lead} ${words.text}`}>
      {times.map(({ time, at }) => (
        <p key={time.word}>
          <span className="phone-pair-word">
            {time.word} {time.day}
          </span>
          <span className={time.isKnown ? 'phone-pair-time num' : 'num text-22'}>{time.clock}</span>
          <span>{at === null ? '' : at > now ? `in ${formatDuration(at - now)}` : `${formatDuration(now - at)} ago`}</span>
        </p>
      ))}
      {note !== null && <p className="phone-pair-note">{note}</p>}
    </div>
  )
}
