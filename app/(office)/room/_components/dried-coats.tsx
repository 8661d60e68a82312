import Link from 'next/link'
import { DemoMark } from '@/app/_components/demo-mark'
import { Fold } from '@/app/(office)/room/_components/fold'
import { formatDuration } from '@/lib/format/duration'
import { formatDate, formatMoment } from '@/lib/format/local-time'
import { formatPercent, formatShare } from '@/lib/format/units'
import type { RoomPage } from '@/lib/room/room-contract'

/** Coats of this week that were dipped over in the room's air, or wait in it. */
export function DriedFold({ page }: { page: RoomPage }) {
  const { dried, now, timeZone } = page
  const count = `${dried.coats.length}${dried.isCut ? ' or more' : ''}`
  return (
    <Fold
      title="Coats that dried here"
      line={dried.coats.length === 0 ? 'none since Monday' : `${count} since ${formatDate(dried.since, timeZone)}`}
    >
      {dried.coats.length === 0 ? (
        <p className="text-soot">Coats that were dipped over, or came dry, in this air since Monday will stand here.</p>
      ) : (
        <div className="point-table">
          <table className="table">
            <thead>
              <tr>
                <th scope="col">Tree</th>
                <th scope="col">Place</th>
                <th scope="col">Dipped</th>
                <th scope="col">Dipped over</th>
                <th scope="col" className="right">
                  Hung
                </th>
                <th scope="col" className="right">
                  Water left
                </th>
                <th scope="col" className="right">
                  Mean RH
                </th>
              </tr>
            </thead>
            <tbody>
              {dried.coats.map((coat) => (
                <tr key={`${coat.tag}-${coat.coatNumber}`}>
                  <th scope="row" className="whitespace-nowrap">
                    <Link href={`/trees/${encodeURIComponent(coat.tag)}`} prefetch={false}>
                      {coat.tag}
                    </Link>{' '}
                    coat {coat.coatNumber} {coat.isDemo && <DemoMark />}
                  </th>
                  <td>{coat.placeName}</td>
                  <td className="whitespace-nowrap">{formatMoment(coat.dippedAt, now, timeZone)}</td>
                  <td className="whitespace-nowrap">{coat.coveredAt === null ? 'waits' : formatMoment(coat.coveredAt, now, timeZone)}</td>
                  <td className="right whitespace-nowrap">{formatDuration((coat.coveredAt ?? now) - coat.dippedAt)}</td>
                  <td className="right num">{formatShare(coat.moistureRatio)}</td>
                  <td className="right num">{formatPercent(coat.meanRelHumidityPct)}</td>
                </tr>
              ))}
            </tbody>
          </table>
        </div>
      )}
    </Fold>
  )
}
