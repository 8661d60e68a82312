import type { WeighingMoment } from '@/lib/coats/vocabulary'
import { timePairWords } from '@/lib/format/time-pair'
import { readTyped, typedWords } from '@/lib/format/typed-units'
import { UNIT_SIGNS, type MassUnit, type TempUnit } from '@/lib/format/units'
import type { QueueTree } from '@/lib/queue/contract'
import { MASS_LIMITS_KG, SURFACE_TEMP_LIMITS_C } from '@/lib/trees/evidence-limits'

/** A coat this fresh has most likely just been weighed with its stucco. Our own choice. */
const FRESH_MS = 20 * 60_000

/** When the tree probably hangs on the scale, for a key that is chosen beforehand. */
export function likelyMoment(tree: Pick<QueueTree, 'newestCoat' | 'state'>, now: number): WeighingMoment {
  if (tree.newestCoat === null) return 'before dip'
  if (now - tree.newestCoat.dippedAt < FRESH_MS) return 'after stucco'
  return ['dip now', 'waiting', 'overdue'].includes(tree.state) ? 'before dip' : 'now'
}

/** A typed number as it is stored, or the sentence that stands beside the field. */
export type Read = { value: number; problem: null } | { value: null; problem: string }

/**
 * A typed weight, in kg.
 *
 * @example readMass('4,25', 'kg') // => { value: 4.25, problem: null }
 * @example readMass('', 'kg') // => { value: null, problem: 'Type the weight in kg.' }
 */
export function readMass(text: string, unit: MassUnit): Read {
  return read(text, { unit, name: 'weight', nothing: `Type the weight in ${UNIT_SIGNS[unit]}.`, limits: MASS_LIMITS_KG })
}

/** A typed surface temperature, in degC. */
export function readSurfaceTemp(text: string, unit: TempUnit): Read {
  return read(text, {
    unit,
    name: 'surface temperature',
    nothing: `Type the temperature in ${UNIT_SIGNS[unit]}.`,
    limits: SURFACE_TEMP_LIMITS_C,
  })
}

type Rule = { unit: MassUnit | TempUnit; name: string; nothing: string; limits: { least: number; most: number } }

function read(text: string, { unit, name, nothing, limits }: Rule): Read {
  const typed = text.trim().replace(',', '.').replace('−', '-')
  if (typed === '') return { value: null, problem: nothing }
  const value = readTyped(Number(typed), unit)
  if (Number.isNaN(value)) return { value: null, problem: `The ${name} is a number.` }
  if (value < limits.least || value > limits.most) {
    return { value: null, problem: `The ${name} lies between ${typedWords(limits.least, unit)} and ${typedWords(limits.most, unit)}.` }
  }
  return { value, problem: null }
}

type Pair = { likelyAt: number | null; safeAt: number | null }
export type Moved = { before: Pair | null; after: Pair | null; unheard: string | null }

/**
 * What a piece of evidence did, for the person who gave it: the pair before and after, or why it moves nothing.
 *
 * @example movedWords({ before, after, unheard: null }, now, timeZone) // => 'Was likely 13:10, safe 14:40; is likely 13:35, safe 14:20.'
 */
export function movedWords({ before, after, unheard }: Moved, now: number, timeZone: string): string {
  if (unheard !== null) return `It moves no time. ${unheard}`
  if (before === null || after === null) return 'It will be held against the weighings to come.'
  const [was, is] = [timePairWords(before, now, timeZone).text, timePairWords(after, now, timeZone).text]
  return was === is ? `The time stands: ${is}.` : `Was ${was}; is ${is}.`
}
