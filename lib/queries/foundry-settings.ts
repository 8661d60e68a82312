import type { FoundryInput } from '@/lib/foundry/foundry-input'
import { Foundry } from '@/models'

/** The foundry's own settings as they are stored. @throws {Error} when the database holds no foundry yet. */
export async function loadFoundrySettings(): Promise<FoundryInput> {
  const foundry = await Foundry.findByPk(1, { rejectOnEmpty: true })
  const { name, timeZone, altitudeM, tempUnit, massUnit, lengthUnit, bandLowTempC, bandHighTempC, bandLowRhPct, bandHighRhPct } = foundry
  return { name, timeZone, altitudeM, tempUnit, massUnit, lengthUnit, bandLowTempC, bandHighTempC, bandLowRhPct, bandHighRhPct }
}
