import { AppError } from '@/lib/core/errors'
import { loadClimateExport } from '@/lib/queries/climate-export'
import { climateRange } from '@/lib/room/climate-csv'
import { memberRoute } from '@/lib/server/api'
import { csvResponse } from '@/lib/server/csv'

/** Climate of one sensor as a file: what the Room page draws over a `range`, or `from` and `to`, local days, at most 31. */
export const GET = memberRoute<{ sensorId: string }>('see', async ({ request, params, clock }) => {
  const range = climateRange.parse(Object.fromEntries(request.nextUrl.searchParams))
  const sensorId = /^\d{1,15}$/.test(params.sensorId) ? Number(params.sensorId) : 0
  const file = await loadClimateExport(sensorId, range, { clock })
  if (!file) throw new AppError('not_found', 'There is no such sensor.')
  // A month of hours, or a year of days, is one part; the next one is empty and ends the file.
  return csvResponse(file.fileName, file.columns, async (index) => (index === 0 ? file.rows : []))
})
