import { Icon } from '@/app/_components/icons'
import { StuccoSwatch } from '@/app/_components/stucco-swatch'
import { TimePair } from '@/app/_components/time-pair'
import type { Moment } from '@/app/(office)/_components/due-words'
import { stuccoWord } from '@/lib/format/coat-words'
import { formatDuration } from '@/lib/format/duration'
import { formatClock, formatDate, formatMoment } from '@/lib/format/local-time'
import { formatPercent, formatSeconds, formatShare, fromSi, oneDecimal, UNIT_SIGNS, wholeNumber, type TempUnit } from '@/lib/format/units'
import { evidenceWords } from '@/lib/trees/evidence-words'
import type { CoatRow } from '@/lib/trees/detail-contract'

type Dipped = NonNullable<CoatRow['on']>

const WAYS: Record<Dipped['way'], string> = { dip: 'Dip', 'two halves': 'Two halves', poured: 'Poured', brushed: 'Brushed' }

function dippedWords(coat: Dipped, timeZone: string): string {
  const clock = `${formatDate(coat.dippedAt, timeZone)} ${formatClock(coat.dippedAt, timeZone)}`
  return coat.roughMinutes === 0 ? clock : `${clock} ± ${coat.roughMinutes}\u00A0min`
}

function climateWords(coat: Dipped, unit: TempUnit): string {
  if (coat.airTempC === null && coat.relHumidityPct === null) return '–'
  return `${coat.airTempC === null ? '–' : oneDecimal(fromSi(coat.airTempC, unit))} / ${coat.relHumidityPct === null ? '–' : wholeNumber(coat.relHumidityPct)}`
}

/** How long the coat was foreseen to dry, from the dip, as a pair. */
function foreseenWords({ dippedAt, forecast }: Dipped): string | null {
  if (forecast.p50At === null || forecast.p90At === null) return null
  return `foreseen: likely ${formatDuration(forecast.p50At - dippedAt)}, safe ${formatDuration(forecast.p90At - dippedAt)}`
}

function dryingWords(coat: Dipped): string {
  return coat.isCovered ? formatDuration(coat.dryingMs) : `${formatDuration(coat.dryingMs)} so far`
}

function leftWords(coat: Dipped, isUnknown: boolean): string {
  if (coat.moistureRatio === null || (isUnknown && !coat.isCovered)) return coat.isCovered ? 'not known' : 'now not known'
  return coat.isCovered ? `${formatShare(coat.moistureRatio)} left` : `now ${formatShare(coat.moistureRatio)} left`
}

function Remarks({ coat, now, timeZone }: { coat: Dipped } & Moment) {
  return (
    <ul className="remarks">
      {coat.deviations.length > 0 && (
        <li>
          <Icon name="warning" className="text-ochre-ink" />
          <span>
            {coat.deviations.join('; ')}.{coat.reason !== null && ` Reason: ${coat.reason}`}
          </span>
        </li>
      )}
      {coat.deviations.length === 0 && coat.reason !== null && <li>Reason: {coat.reason}</li>}
      {coat.evidence.map((piece) => (
        <li key={piece.id}>
          <Icon name={piece.verdict === 'dry' ? 'check' : 'drop'} />
          <span>
            {piece.by}, {formatMoment(piece.at, now, timeZone)}: {evidenceWords(piece)}
            {piece.moistureRatio !== null && `, at ${formatShare(piece.moistureRatio)} by the clock`}
            {piece.withdrawnAt !== null && ' (withdrawn)'}
          </span>
        </li>
      ))}
    </ul>
  )
}

const hasRemarks = (coat: Dipped) => coat.deviations.length > 0 || coat.reason !== null || coat.evidence.length > 0

function Planned({ row, now, timeZone }: { row: CoatRow } & Moment) {
  if (row.planned === null || row.planned.likelyAt === null) return <>to come, not in sight yet</>
  // Where the dip before it or the shift decides, and not how this coat dries, there is no band to show.
  if (row.planned.likelyAt === row.planned.safeAt) {
    return <>planned from {formatMoment(row.planned.likelyAt, now, timeZone)} at the earliest</>
  }
  return (
    <>
      planned <TimePair pair={row.planned} now={now} timeZone={timeZone} />
    </>
  )
}

/** The coat log: thirteen columns on a desk, a list on a phone. */
export function CoatLog({
  coats,
  isUnknown,
  tempUnit,
  now,
  timeZone,
}: { coats: readonly CoatRow[]; isUnknown: boolean; tempUnit: TempUnit } & Moment) {
  return (
    <>
      <div className="coat-log-wide" tabIndex={-1}>
        <table className="table coat-log">
          <thead>
            <tr>
              <th scope="col">Coat</th>
              <th scope="col">Stucco</th>
              <th scope="col">Bath</th>
              <th scope="col">How</th>
              <th scope="col">Dipped</th>
              <th scope="col">By</th>
              <th scope="col">Place</th>
              <th scope="col" className="right">
                Drain
              </th>
              <th scope="col" className="right">
                {UNIT_SIGNS[tempUnit]} / % RH
                <br />
                at dip
              </th>
              <th scope="col" className="right">
                Mean RH
                <br />
                drying
              </th>
              <th scope="col" className="right">
                Worst RH
                <br />
                drying
              </th>
              <th scope="col" className="right">
                Drying time
              </th>
              <th scope="col" className="right">
                Dryness
                <br />
                at redip
              </th>
            </tr>
          </thead>
          {coats.map((row) => (
            <tbody key={row.number} className={row.isNewest ? 'is-newest' : row.on === null ? 'is-planned' : undefined}>
              <tr>
                <th scope="row" className="num">
                  {row.number}
                </th>
                <td>
                  <span className="flex items-center gap-2">
                    <StuccoSwatch stucco={row.stucco} width={36} height={20} />
                    {row.kind === 'core fill' ? `${stuccoWord(row.stucco)}, core fill` : stuccoWord(row.stucco)}
                  </span>
                </td>
                <td>{row.bathName}</td>
                {row.on === null ? (
                  <td colSpan={10}>
                    <Planned row={row} now={now} timeZone={timeZone} />
                  </td>
                ) : (
                  <>
                    <td>{WAYS[row.on.way]}</td>
                    <td>{dippedWords(row.on, timeZone)}</td>
                    <td>{row.on.by}</td>
                    <td>{row.on.placeName}</td>
                    <td className="right num">{formatSeconds(row.on.drainSeconds)}</td>
                    <td className="right num">{climateWords(row.on, tempUnit)}</td>
                    <td className="right num">{formatPercent(row.on.meanRelHumidityPct)}</td>
                    <td className="right num">{formatPercent(row.on.worstRelHumidityPct)}</td>
                    <td className="right">
                      <span className="num">{dryingWords(row.on)}</span>
                    </td>
                    <td className="right num">{leftWords(row.on, isUnknown)}</td>
                  </>
                )}
              </tr>
              {row.on !== null && (hasRemarks(row.on) || foreseenWords(row.on) !== null) && (
                <tr className="remark-row">
                  <td colSpan={10}>
                    <Remarks coat={row.on} now={now} timeZone={timeZone} />
                  </td>
                  <td colSpan={3} className="right">
                    {foreseenWords(row.on)}
                  </td>
                </tr>
              )}
            </tbody>
          ))}
        </table>
      </div>
      <ol className="coat-log-narrow" reversed>
        {coats.map((row) => (
          <li key={row.number} className={row.isNewest ? 'is-newest' : undefined}>
            <b className="num">{row.number}</b>
            <div>
              {row.on === null ? (
                <p className="text-soot">
                  {stuccoWord(row.stucco)}, <Planned row={row} now={now} timeZone={timeZone} />
                </p>
              ) : (
                <>
                  <p>
                    {stuccoWord(row.stucco)}, {dippedWords(row.on, timeZone)}
                    <span className="by">{row.on.by}</span>
                  </p>
                  <details>
                    <summary>
                      {dryingWords(row.on)}, {leftWords(row.on, isUnknown)}
                    </summary>
                    <dl className="facts">
                      <dt>Bath</dt>
                      <dd>
                        {row.bathName}, {WAYS[row.on.way].toLowerCase()}, drain {formatSeconds(row.on.drainSeconds)}
                      </dd>
                      <dt>Place</dt>
                      <dd>{row.on.placeName}</dd>
                      <dt>{UNIT_SIGNS[tempUnit]} / % RH at dip</dt>
                      <dd>{climateWords(row.on, tempUnit)}</dd>
                      <dt>RH while drying</dt>
                      <dd>
                        mean {formatPercent(row.on.meanRelHumidityPct)}, worst {formatPercent(row.on.worstRelHumidityPct)}
                      </dd>
                    </dl>
                    <p className="text-15 text-soot">{foreseenWords(row.on)}</p>
                  </details>
                  <Remarks coat={row.on} now={now} timeZone={timeZone} />
                </>
              )}
            </div>
          </li>
        ))}
      </ol>
    </>
  )
}
