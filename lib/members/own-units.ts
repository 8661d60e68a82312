import { z } from 'zod'
import { LENGTH_UNITS, MASS_UNITS, TEMP_UNITS } from '@/lib/format/units'

const orAsTheFoundry = <Unit extends z.ZodType<string>>(unit: Unit) => z.union([z.literal('').transform(() => null), unit])

/** The units a member reads and types in, from their form; empty is 'as the foundry has them', stored as null. */
export const ownUnits = z.strictObject({
  tempUnit: orAsTheFoundry(z.enum(TEMP_UNITS)),
  massUnit: orAsTheFoundry(z.enum(MASS_UNITS)),
  lengthUnit: orAsTheFoundry(z.enum(LENGTH_UNITS)),
})
export type OwnUnits = z.infer<typeof ownUnits>
