import { typedWords } from '@/lib/format/typed-units'
import { formatTemperature, type MassUnit, type TempUnit } from '@/lib/format/units'
import type { EvidenceFacts } from '@/lib/trees/facts'

const SPOT_WORDS = { outside: 'outside', recess: 'in the recess', core: 'in the core' } as const

const MOMENT_WORDS = { 'before dip': 'before the dip', 'after stucco': 'after the stucco', now: 'while drying' } as const

type Said = Pick<EvidenceFacts, 'kind' | 'spot' | 'verdict' | 'moment' | 'massKg' | 'surfaceTempC' | 'airTempC'>

/**
 * One piece of evidence in a few words, in somebody's units.
 *
 * @example evidenceWords({ kind: 'touch', spot: 'core', verdict: 'not yet', … }) // => 'felt in the core: not yet'
 */
export function evidenceWords(piece: Said, units: { temp: TempUnit; mass: MassUnit } = { temp: 'degC', mass: 'kg' }): string {
  const where = SPOT_WORDS[piece.spot ?? 'outside']
  switch (piece.kind) {
    case 'touch':
      return `felt ${where}: ${piece.verdict}`
    case 'colour':
      return `colour ${where}: ${piece.verdict}`
    case 'weighing':
      return `weighed ${typedWords(piece.massKg ?? 0, units.mass)} ${MOMENT_WORDS[piece.moment ?? 'now']}`
    case 'surface temperature': {
      const air = piece.airTempC === null ? '' : ` in air of ${formatTemperature(piece.airTempC, units.temp)}`
      return `surface ${where} at ${formatTemperature(piece.surfaceTempC ?? 0, units.temp)}${air}`
    }
  }
}
