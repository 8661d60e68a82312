import { leftOf, shareOf, type Frame } from '@/app/(office)/room/_components/chart-frame'
import { timePairWords } from '@/lib/format/time-pair'
import type { CoatBar } from '@/lib/room/room-contract'

/** Coats in progress below the hours: from the dip to likely, and on to safe. */
export function CoatBars({ frame, bars }: { frame: Frame; bars: readonly CoatBar[] }) {
  if (bars.length === 0) return null
  return (
    <div className="figure-chart">
      <ul className="coat-bars" aria-label="Coats in progress">
        {bars.map((bar) => {
          const until = bar.likelyAt ?? frame.now
          const words = bar.likelyAt === null && bar.safeAt === null ? 'not known' : timePairWords(bar, frame.now, frame.timeZone).text
          return (
            <li key={bar.tag}>
              <span
                className={bar.likelyAt === null ? 'coat-bar is-open' : 'coat-bar'}
                style={{
                  left: leftOf(frame, bar.dippedAt),
                  width: `${((shareOf(frame, until) - shareOf(frame, bar.dippedAt)) * 100).toFixed(3)}%`,
                }}
              />
              {bar.safeAt !== null && bar.likelyAt !== null && (
                <span
                  className="coat-bar is-doubt"
                  style={{
                    left: leftOf(frame, bar.likelyAt),
                    width: `${((shareOf(frame, bar.safeAt) - shareOf(frame, bar.likelyAt)) * 100).toFixed(3)}%`,
                  }}
                />
              )}
              <span className="coat-bar-words" style={{ left: leftOf(frame, bar.dippedAt) }}>
                <b className="num">{bar.tag}</b> <span className="not-phone">coat {bar.coatNumber}</span>
                <span className="vh">: {words}</span>
              </span>
            </li>
          )
        })}
      </ul>
      <p className="figure-words">
        <b className="figure-name">Coats in progress</b>
        <span>from the dip to likely, dotted to safe</span>
      </p>
    </div>
  )
}
