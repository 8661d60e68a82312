import { Icon } from '@/app/_components/icons'
import type { PourVerdict } from '@/lib/burnout/pour-verdict'
import { formatDay } from '@/lib/format/local-time'

const WORDS: Record<PourVerdict, string> = {
  holds: 'holds',
  tight: 'tight',
  'will miss': 'will miss',
  passed: 'day has passed',
  'not in sight': 'not in sight',
}

/** A pour date with its verdict: mark, word, colour. */
export function PourWords({ pourDate, verdict }: { pourDate: string | null; verdict: PourVerdict | null }) {
  if (pourDate === null) return <span className="text-soot">no date</span>
  return (
    <span className="whitespace-nowrap">
      {formatDay(pourDate)}
      {verdict !== null && (
        <>
          {' '}
          <PourVerdictMark verdict={verdict} />
        </>
      )}
    </span>
  )
}

function PourVerdictMark({ verdict }: { verdict: PourVerdict }) {
  const isMissed = verdict === 'will miss' || verdict === 'passed'
  const tone = isMissed
    ? 'text-furnace-ink'
    : verdict === 'tight'
      ? 'text-ochre-ink'
      : verdict === 'holds'
        ? 'text-verdigris-ink'
        : 'text-soot'
  return (
    <b className={`whitespace-nowrap ${tone}`}>
      {isMissed && <MissMark />}
      {verdict === 'tight' && <Icon name="warning" />}
      {verdict === 'holds' && <Icon name="check" />} {WORDS[verdict]}
    </b>
  )
}

/** Two triangles, the mark of what is too late. */
export function MissMark() {
  return (
    <svg className="mark" viewBox="0 0 24 24" aria-hidden="true" focusable="false">
      <path d="M3 1.5h18L12 12zM3 12h18L12 23z" fill="currentColor" />
    </svg>
  )
}
