'use client'

import { Icon } from '@/app/_components/icons'
import { useUnits } from '@/app/_components/units-context'
import { formatClock, formatDateOfYear } from '@/lib/format/local-time'
import { formatTemperature, oneDecimal } from '@/lib/format/units'
import type { UploadPreview } from '@/lib/uploads/upload-contract'
import type { UploadSettings } from '@/lib/uploads/upload-settings'

/** The first rows: as they are read, and beside it as they stand in the file. */
export function PreviewRows({ preview, settings, timeZone }: { preview: UploadPreview; settings: UploadSettings; timeZone: string }) {
  const units = useUnits()
  const hasPressure = settings.pressureColumn !== null
  if (preview.rows.length === 0) {
    return <p className="plate-body text-soot">There is no row behind these lines. Are there fewer lines before the data?</p>
  }
  return (
    // A wide file is moved sideways in its own frame.
    // oxlint-disable-next-line jsx-a11y/no-noninteractive-tabindex -- a frame that is moved sideways has to be reached by the keyboard
    <div className="upload-frame" tabIndex={0} role="region" aria-label="Rows of the file">
      <table className="table upload-rows">
        <thead>
          <tr>
            <th className="right">Line</th>
            <th>Read as</th>
            <th className="right">Temperature</th>
            <th className="right">Humidity</th>
            {hasPressure && <th className="right">Pressure</th>}
            {preview.columns.map(({ name }, column) => (
              <th key={column} className="upload-raw" data-role={roleOf(column, settings)}>
                {column + 1}
                {name !== '' && `: ${name}`}
                {roleOf(column, settings) && <span>{roleOf(column, settings)}</span>}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {preview.rows.map((row) => (
            <tr key={row.line} data-good={row.reason === null}>
              <td className="num right">{row.line}</td>
              {row.measuredAt === null ? (
                <td colSpan={hasPressure ? 4 : 3} className="upload-reason">
                  <Icon name="warning" /> {row.reason}
                </td>
              ) : (
                <>
                  <td className="upload-moment">
                    {formatDateOfYear(row.measuredAt, timeZone)} <b>{formatClock(row.measuredAt, timeZone)}</b>
                    {row.reason !== null && (
                      <span className="upload-reason">
                        <Icon name="warning" /> {row.reason}
                      </span>
                    )}
                  </td>
                  <td className="num right">{formatTemperature(row.airTempC, units.temp)}</td>
                  <td className="num right">{row.relHumidityPct === null ? '' : `${oneDecimal(row.relHumidityPct)}\u00A0%`}</td>
                  {hasPressure && (
                    <td className="num right">{row.pressurePa === null ? '' : `${oneDecimal(row.pressurePa / 100)}\u00A0hPa`}</td>
                  )}
                </>
              )}
              {preview.columns.map((_, column) => (
                <td key={column} className="upload-raw" data-role={roleOf(column, settings)}>
                  {row.cells[column] ?? ''}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}

function roleOf(column: number, settings: UploadSettings): string | undefined {
  if (column === settings.dateColumn) return settings.clockColumn === null ? 'time' : 'date'
  if (column === settings.clockColumn) return 'clock'
  if (column === settings.tempColumn) return 'temperature'
  if (column === settings.humidityColumn) return 'humidity'
  return column === settings.pressureColumn ? 'pressure' : undefined
}
