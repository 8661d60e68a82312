import { checkEach, checkForecasts, type ForecastCheck } from '@/lib/calibration/forecast-check'
import { canGoBack } from '@/lib/calibration/going-back'
import { checkedCoat, LEFT_OUT, LEFT_OUT_REASONS, leftOut, type CheckedCoat, type LeftOut } from '@/lib/calibration/left-out'
import {
  countedCoats,
  placeProposals,
  recessProposals,
  recipeCoatProposals,
  type FactorProposal,
  type RecipeCoatProposal,
} from '@/lib/calibration/proposals'
import type { Recess } from '@/lib/calibration/types'
import { loadCalibrationRows, type CalibrationLine } from '@/lib/queries/calibration-rows'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { loadClockNow, loadOutcomes, loadUnheardCoats, MOST_OUTCOMES, type RecipeNow } from '@/lib/queries/load-outcomes'
import { loadMovingTrees } from '@/lib/queries/moving-trees'
import { moveRefusal } from '@/lib/recipes/move-rules'

/** A recipe with what finished coats say of each of its coats. */
export type RecipeCalibration = RecipeNow & {
  coats: (RecipeCoatProposal & { check: ForecastCheck })[]
  /** Open trees that a new version would find on this recipe, and how many of them may be moved to it. */
  openTrees: number
  movableTrees: number
}

export type LeftOutCoats = { reason: LeftOut; text: string; count: number; newest: { tag: string; number: number }[] }

export type NamedCheck = { name: string; check: ForecastCheck }

export type CalibrationPage = {
  now: number
  timeZone: string
  /** Coats with evidence that are looked at, newest first, and whether older ones were cut off. */
  outcomeCount: number
  isCut: boolean
  countedCount: number
  clock: ForecastCheck
  /** Coats behind the sentence and the charts, newest first. */
  checked: CheckedCoat[]
  recipes: RecipeCalibration[]
  places: (FactorProposal<string> & { name: string })[]
  recesses: FactorProposal<Recess>[]
  byPlace: NamedCheck[]
  byPerson: NamedCheck[]
  leftOut: LeftOutCoats[]
  /** Coats that were dipped over before they were dry: they tell of needs, and not of times. */
  earlyCount: number
  accepted: (CalibrationLine & { mayGoBack: boolean })[]
}

/** So many coats of a reason are linked. */
const NEWEST_SHOWN = 6

/** Everything that the page of the calibration shows: bounded by the newest five hundred coats with evidence of the last two years. */
export async function loadCalibration(now: number): Promise<CalibrationPage> {
  const foundry = await loadFoundry()
  const [outcomes, unheard, { now: clockNow, recipes }, rows] = await Promise.all([
    loadOutcomes(foundry, now),
    loadUnheardCoats(now),
    loadClockNow(foundry),
    loadCalibrationRows(),
  ])
  const counted = countedCoats(outcomes, clockNow)
  const checked = counted.flatMap(({ outcome }) => checkedCoat(outcome) ?? [])
  const placeName = new Map(foundry.places.map(({ id, name }) => [id, name]))
  const nameOf = (id: string) => placeName.get(id) ?? 'a place that is gone'
  const proposals = recipeCoatProposals(counted, clockNow)
  const goesBack = canGoBack(rows, clockNow)
  const isInUse = new Set(foundry.places.filter(({ isRetired }) => !isRetired).map(({ id }) => id))
  return {
    now,
    timeZone: foundry.timeZone,
    outcomeCount: outcomes.length,
    isCut: outcomes.length >= MOST_OUTCOMES,
    countedCount: counted.length,
    clock: checkForecasts(checked),
    checked,
    recipes: await Promise.all(
      recipes
        .filter(({ isRetired }) => !isRetired)
        .map(async (recipe) => {
          const coats = proposals
            .filter(({ coat }) => coat.recipeId === recipe.id)
            .map((proposal) => ({ ...proposal, check: checkForecasts(checked.filter((coat) => isOf(coat, proposal))) }))
          const trees = coats.some(({ isOpen }) => isOpen) ? await loadMovingTrees({ recipeId: recipe.id }) : []
          const to = { recipeId: recipe.id, version: recipe.version + 1, coatCount: coats.length }
          const movableTrees = trees.filter((tree) => moveRefusal(tree, to) === null).length
          return { ...recipe, coats, openTrees: trees.length, movableTrees }
        }),
    ),
    places: placeProposals(counted, clockNow)
      .filter(({ subject }) => isInUse.has(subject))
      .map((proposal) => ({ ...proposal, name: nameOf(proposal.subject) })),
    recesses: recessProposals(counted, clockNow),
    byPlace: checkEach(checked, ({ outcome }) => outcome.placeId).map(({ key, check }) => ({ name: nameOf(key), check })),
    byPerson: checkEach(checked, ({ outcome }) => outcome.dippedBy.id).map(({ key, check }) => ({
      name: checked.find(({ outcome }) => outcome.dippedBy.id === key)?.outcome.dippedBy.name ?? '',
      check,
    })),
    leftOut: leftOutCoats([
      ...unheard.map(({ tag, number }) => ({ tag, number, reason: 'no evidence' as const })),
      ...outcomes.flatMap((outcome) => {
        const planned = clockNow.recipeCoats.find((coat) => coat.recipeId === outcome.recipeId && coat.number === outcome.number)
        const reason = leftOut(outcome, planned ?? null)
        return reason === null ? [] : [{ tag: outcome.tag, number: outcome.number, reason }]
      }),
    ]),
    earlyCount: counted.filter(({ outcome }) => outcome.dryAt === null).length,
    accepted: rows.map((row) => ({ ...row, mayGoBack: goesBack.has(row.id) })),
  }
}

const isOf = ({ outcome }: CheckedCoat, { coat }: RecipeCoatProposal) =>
  outcome.recipeId === coat.recipeId && outcome.number === coat.number

function leftOutCoats(coats: readonly { tag: string; number: number; reason: LeftOut }[]): LeftOutCoats[] {
  return LEFT_OUT_REASONS.flatMap((reason) => {
    const those = coats.filter((coat) => coat.reason === reason)
    if (those.length === 0) return []
    return [
      {
        reason,
        text: LEFT_OUT[reason],
        count: those.length,
        newest: those.slice(0, NEWEST_SHOWN).map(({ tag, number }) => ({ tag, number })),
      },
    ]
  })
}
