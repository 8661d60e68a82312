/** No scale of a shell room weighs more, and no tree less, kg. */
export const MASS_LIMITS_KG = { least: 0.01, most: 2000 }

/** What a coat's surface can be: a little under the air, or under a lamp, degC. */
export const SURFACE_TEMP_LIMITS_C = { least: -10, most: 80 }
