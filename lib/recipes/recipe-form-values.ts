import { COAT_KINDS, type CoatKind } from '@/lib/coats/vocabulary'
import {
  DEFAULT_LAST_MOISTURE_TARGET,
  DEFAULT_LONGEST_WAIT_HOURS,
  DEFAULT_MOISTURE_TARGET,
  defaultReferenceHours,
} from '@/lib/drying/recipe-defaults'
import { shortNumber, type CoatCells, type VersionCoat } from '@/lib/recipes/coat-cells'
import { MOST_COATS } from '@/lib/recipes/recipe-input'

/** A coat as typed: text as it stands in the fields; the target in percent of the coat's water. */
export type CoatValues = {
  kind: string
  bathId: string
  stucco: string
  needReferenceHours: string
  targetPct: string
  guard: string
  drainSeconds: string
  longestWaitHours: string
  isPrewet: boolean
  readAloud: string
}

type KnownBath = { id: string; name: string; kind: 'face' | 'backup'; isRetired: boolean }

/** Seconds to drain, by the kind of coat. Common practice, no source. */
const DRAIN_SECONDS: Record<CoatKind, number> = { face: 75, backup: 40, 'core fill': 60, seal: 45 }

function text(form: FormData, name: string): string {
  const value = form.get(name)
  return typeof value === 'string' ? value.trim() : ''
}

/** '10' is 0.1; what is not a number goes on as it was typed, so that its field can say so. */
function shareOf(percent: string): string | number {
  const value = Number(percent.replace(',', '.'))
  return percent === '' || Number.isNaN(value) ? percent : value / 100
}

/** Form fields to what a recipe or a version of it takes. Coats come as `coats.0.kind`, and so on, from 0 without a gap. */
export function readRecipeForm(form: FormData) {
  const coats = []
  for (let index = 0; index <= MOST_COATS && form.has(`coats.${index}.kind`); index += 1) {
    const field = (name: string) => text(form, `coats.${index}.${name}`)
    coats.push({
      kind: field('kind'),
      bathId: field('bathId'),
      stucco: field('stucco'),
      needReferenceHours: field('needReferenceHours'),
      moistureTarget: shareOf(field('moistureTarget')),
      guard: field('guard'),
      drainSeconds: field('drainSeconds'),
      longestWaitHours: field('longestWaitHours'),
      isPrewet: form.get(`coats.${index}.isPrewet`) === 'on',
      readAloud: field('readAloud'),
    })
  }
  return { name: text(form, 'name'), note: text(form, 'note'), from: text(form, 'from'), follows: text(form, 'follows'), coats }
}

/** A stored coat as its row in the form shows it. */
export function coatValuesOf(coat: VersionCoat): CoatValues {
  return {
    kind: coat.kind,
    bathId: coat.bathId,
    stucco: coat.stucco,
    needReferenceHours: shortNumber(coat.needReferenceHours),
    targetPct: shortNumber(coat.moistureTarget * 100),
    guard: coat.guard,
    drainSeconds: shortNumber(coat.drainSeconds),
    longestWaitHours: shortNumber(coat.longestWaitHours),
    isPrewet: coat.isPrewet,
    readAloud: coat.readAloud,
  }
}

/** A figure as it would be shown; what is not one, as it was typed. */
function figure(typed: string): string {
  const value = Number(typed.replace(',', '.'))
  return typed.trim() === '' || Number.isNaN(value) ? typed.trim() : shortNumber(value)
}

/** A typed row in the words of a coat, to be compared with a stored one. */
export function cellsOfValues(values: CoatValues, baths: readonly { id: string; name: string }[]): CoatCells {
  return {
    kind: values.kind,
    bath: baths.find(({ id }) => id === values.bathId)?.name ?? '',
    stucco: values.stucco,
    need: figure(values.needReferenceHours),
    target: figure(values.targetPct),
    guard: values.guard,
    drain: figure(values.drainSeconds),
    longestWait: figure(values.longestWaitHours),
    prewet: values.isPrewet ? 'yes' : 'no',
    readAloud: values.readAloud.trim(),
  }
}

/** Our starting value for the need of a row, by its kind and how many of that kind lie below it; null for no kind. */
export function startingNeed(coats: readonly CoatValues[], index: number): string | null {
  const kind = COAT_KINDS.find((known) => known === coats[index]?.kind)
  if (kind === undefined) return null
  return shortNumber(defaultReferenceHours(kind, coats.slice(0, index).filter((coat) => coat.kind === kind).length))
}

/** A coat of a kind with our starting values, to be put in at an index. Its bath and grade are those of the nearest such coat below. */
export function startingCoat(kind: CoatKind, coats: readonly CoatValues[], index: number, baths: readonly KnownBath[]): CoatValues {
  const below = coats.slice(0, index)
  const like = below.findLast((coat) => coat.kind === kind)
  const bathKind = kind === 'face' ? 'face' : 'backup'
  return {
    kind,
    bathId: like?.bathId ?? baths.find((bath) => bath.kind === bathKind && !bath.isRetired)?.id ?? '',
    stucco: kind === 'seal' ? 'none' : (like?.stucco ?? (kind === 'face' ? 'fine' : 'coarse')),
    needReferenceHours: shortNumber(defaultReferenceHours(kind, below.filter((coat) => coat.kind === kind).length)),
    targetPct: shortNumber((kind === 'seal' ? DEFAULT_LAST_MOISTURE_TARGET : DEFAULT_MOISTURE_TARGET) * 100),
    guard: kind === 'face' || kind === 'seal' ? 'safe' : 'likely',
    drainSeconds: like?.drainSeconds ?? String(DRAIN_SECONDS[kind]),
    longestWaitHours: like?.longestWaitHours ?? String(DEFAULT_LONGEST_WAIT_HOURS[kind]),
    isPrewet: index > 0 && kind !== 'core fill',
    readAloud: like?.readAloud ?? '',
  }
}

/** Where the next coat goes in: under the seal when the last row is one. */
export const nextCoatIndex = (coats: readonly CoatValues[]): number => (coats.at(-1)?.kind === 'seal' ? coats.length - 1 : coats.length)
