import { Icon } from '@/app/_components/icons'
import { formatBytes } from '@/lib/format/bytes'
import { formatMoment } from '@/lib/format/local-time'
import type { BackupRow } from '@/lib/queries/backup-list'

/** The newest copies and tries at one. */
export function BackupTable({ rows, now, timeZone }: { rows: readonly BackupRow[]; now: number; timeZone: string }) {
  return (
    <table className="table upkeep-backups">
      <thead>
        <tr>
          <th>Made</th>
          <th>Kind</th>
          <th className="right">Size</th>
          <th>How it stands</th>
        </tr>
      </thead>
      <tbody>
        {rows.map((row) => (
          <tr key={row.id}>
            <td className="num">{formatMoment(row.at, now, timeZone)}</td>
            <td>{row.kind}</td>
            <td className="num right">{row.sizeBytes === null ? '' : formatBytes(row.sizeBytes)}</td>
            <td>
              <Standing row={row} now={now} timeZone={timeZone} />
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  )
}

function Standing({ row, now, timeZone }: { row: BackupRow; now: number; timeZone: string }) {
  if (row.outcome === 'under way') return 'Under way'
  if (row.outcome === 'failed') {
    return (
      <span className="state-furnace">
        <Icon name="warning" /> {row.error ?? 'Failed'}
      </span>
    )
  }
  if (row.provenAt === null) return 'Read through'
  return (
    <span className="state-verdigris">
      <Icon name="check" /> Restored for a try {formatMoment(row.provenAt, now, timeZone)}
    </span>
  )
}
