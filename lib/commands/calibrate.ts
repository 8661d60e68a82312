import { addFoundryEvent } from '@/lib/commands/foundry-event'
import { moveTreesToVersion } from '@/lib/commands/move-tree-recipe'
import { keepFormerAir } from '@/lib/commands/save-place'
import { stopBeingDemo } from '@/lib/commands/stop-being-demo'
import { writeVersion } from '@/lib/commands/write-version'
import type { AcceptCoatsInput, AcceptFactorInput } from '@/lib/calibration/calibration-input'
import { acceptedNote, changeWords, factorWords, wentBackNote } from '@/lib/calibration/calibration-words'
import { canGoBack } from '@/lib/calibration/going-back'
import { countedCoats, placeProposals, recessProposals, recipeCoatProposals } from '@/lib/calibration/proposals'
import type { Recess } from '@/lib/calibration/types'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import { nameList } from '@/lib/format/name-list'
import type { Actor } from '@/lib/members/actor'
import { loadCalibrationRows, type CalibrationLine } from '@/lib/queries/calibration-rows'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { loadClockNow, loadOutcomes } from '@/lib/queries/load-outcomes'
import { loadMovingTrees } from '@/lib/queries/moving-trees'
import { loadVersionCoats, type StoredCoat } from '@/lib/queries/version-coats'
import { moveRefusal } from '@/lib/recipes/move-rules'
import { Calibration, FanHours, inTransaction, Place, Recipe, RecipeVersion } from '@/models'

type By = { member: Actor; clock: Clock }

const CHANGED_MEANWHILE = 'More coats have come, or the figures were changed meanwhile. Look at the proposal again: nothing was changed.'

/** `staying`: open trees that still stand on an older version. */
export type AcceptedCoats = { recipeId: string; version: number; moved: string[]; staying: number }

/**
 * Takes over what finished coats say of some coats of a recipe, or confirms their needs, as one new version: the other coats stay as they
 * are. Trees stand on their version until somebody moves them, here in the same transaction where that is asked for.
 *
 * @throws {AppError} not_found; conflict when the recipe is retired, a version was made meanwhile, or a proposal is not the one that was
 *   seen any more; and whatever a move of trees refuses.
 */
export function acceptRecipeCoats(input: AcceptCoatsInput, by: By): Promise<AcceptedCoats> {
  return inTransaction(async () => {
    const foundry = await loadFoundry()
    const at = by.clock.now()
    const [{ now }, outcomes] = await Promise.all([loadClockNow(foundry), loadOutcomes(foundry, at)])
    const proposals = recipeCoatProposals(countedCoats(outcomes, now), now).filter(({ coat }) => coat.recipeId === input.recipeId)
    const accepted = input.coats.map(({ number, needReferenceHours }) => {
      const proposal = proposals.find(({ coat }) => coat.number === number)
      if (!proposal?.isOpen || Math.abs(proposal.needAfter - needReferenceHours) > 1e-6) throw new AppError('conflict', CHANGED_MEANWHILE)
      return {
        number,
        needBefore: proposal.coat.needReferenceHours,
        needAfter: proposal.needAfter,
        spreadAfter: proposal.spreadAfter,
        coatsAfter: proposal.learned.count,
      }
    })
    const made = await addCalibratedVersion(input.recipeId, accepted, { follows: input.follows, note: acceptedNote(accepted) }, by)
    const { moved, staying } = await moveAlong(input.recipeId, made, input.isMovingTrees, by)
    return { recipeId: input.recipeId, version: made.version, moved, staying }
  })
}

type NewFigure = {
  number: number
  needAfter: number
  spreadAfter: number
  coatsAfter: number | null
}
type MadeVersion = { versionId: string; version: number; coatCount: number }

/** One new version with new figures of some coats, its rows and its line of history. */
async function addCalibratedVersion(
  recipeId: string,
  figures: readonly NewFigure[],
  { follows, note, goesBackOn = null }: { follows: number | null; note: string; goesBackOn?: string | null },
  { member, clock }: By,
): Promise<MadeVersion> {
  const at = clock.now()
  const recipe = await Recipe.findByPk(recipeId)
  if (!recipe) throw new AppError('not_found', 'There is no such recipe.')
  if (recipe.retiredAt !== null) throw new AppError('conflict', `${recipe.name} is retired.`)
  const newest = await RecipeVersion.findOne({ where: { recipeId }, order: [['version', 'DESC']], rejectOnEmpty: true })
  if (follows !== null && newest.version !== follows) throw new AppError('conflict', CHANGED_MEANWHILE)
  const before = (await loadVersionCoats([newest.id])).get(newest.id) ?? []
  const after = before.map((coat): StoredCoat => {
    const figure = figures.find(({ number }) => number === coat.number)
    if (!figure) return coat
    return {
      ...coat,
      needReferenceHours: figure.needAfter,
      needSpread: figure.spreadAfter,
      calibratedByCoats: figure.coatsAfter,
    }
  })
  const version = newest.version + 1
  const isCalibrated = after.every(({ calibratedByCoats }) => calibratedByCoats !== null)
  const versionId = await writeVersion(
    recipeId,
    version,
    { note, coats: after.map(({ number: _number, bathName: _bathName, ...coat }) => coat), calibratedAt: isCalibrated ? at : null },
    { member, now: at },
  )
  const changes = figures.map(({ number }) => ({ was: before[number - 1]!, is: after[number - 1]! }))
  for (const { was, is } of changes) {
    await Calibration.create({
      id: newId(at),
      scope: 'recipe coat',
      recipeId,
      recipeVersionId: versionId,
      coatNumber: was.number,
      figureBefore: was.needReferenceHours,
      figureAfter: is.needReferenceHours,
      spreadBefore: was.needSpread,
      spreadAfter: is.needSpread,
      coatsBefore: was.calibratedByCoats,
      coatsAfter: is.calibratedByCoats,
      memberId: member.id,
      at,
      goesBackOn,
    })
  }
  await stopBeingDemo(recipe, member)
  await addFoundryEvent(
    { type: 'recipe', id: recipeId, name: recipe.name },
    {
      kind: goesBackOn === null ? 'recipe calibrated' : 'calibration gone back on',
      by: member,
      at,
      text: `Version ${version} of ${recipe.name}: ${note}`,
      before: { version: newest.version, coats: changes.map(({ was }) => inHistory(was)) },
      after: { version, coats: changes.map(({ is }) => inHistory(is)) },
    },
  )
  return { versionId, version, coatCount: after.length }
}

const inHistory = ({ number, needReferenceHours, needSpread, calibratedByCoats }: StoredCoat) => ({
  number,
  needReferenceHours,
  needSpread,
  calibratedByCoats,
})

async function moveAlong(
  recipeId: string,
  { versionId, version, coatCount }: MadeVersion,
  isMoving: boolean,
  by: By,
): Promise<{ moved: string[]; staying: number }> {
  const trees = await loadMovingTrees({ recipeId })
  const movable = isMoving ? trees.filter((tree) => moveRefusal(tree, { recipeId, version, coatCount }) === null) : []
  if (movable.length === 0) return { moved: [], staying: trees.length }
  const { tags } = await moveTreesToVersion({ versionId, treeIds: movable.map(({ id }) => id) }, by)
  return { moved: tags, staying: trees.length - tags.length }
}

/**
 * Takes over what finished coats say of a place's air, from now on, or of a class of recess, for coats to come. What has dried keeps its
 * air, and coats that are on keep their need.
 *
 * @throws {AppError} conflict when the place is retired, or the proposal is not the one that was seen any more.
 */
export function acceptFactor(input: AcceptFactorInput, by: By): Promise<void> {
  return inTransaction(async () => {
    const foundry = await loadFoundry()
    const [{ now }, outcomes] = await Promise.all([loadClockNow(foundry), loadOutcomes(foundry, by.clock.now())])
    const counted = countedCoats(outcomes, now)
    const proposal =
      input.scope === 'place'
        ? placeProposals(counted, now).find(({ subject }) => subject === input.placeId)
        : recessProposals(counted, now).find(({ subject }) => subject === input.recessClass)
    if (proposal?.verdict !== 'change' || Math.abs(proposal.factorAfter - input.factor) > 1e-6) {
      throw new AppError('conflict', CHANGED_MEANWHILE)
    }
    const figures: FactorChange = {
      before: proposal.factorBefore,
      after: proposal.factorAfter,
      spreadAfter: proposal.learned.sd,
      coatsAfter: proposal.learned.count,
      goesBackOn: null,
    }
    if (input.scope === 'place') await setAirFactor(input.placeId, figures, by)
    else await setRecessFactor(input.recessClass, figures, by)
  })
}

type FactorChange = {
  before: number
  after: number
  spreadAfter: number | null
  coatsAfter: number | null
  goesBackOn: string | null
}

async function setAirFactor(placeId: string, change: FactorChange, { member, clock }: By): Promise<void> {
  const at = clock.now()
  const place = await Place.findByPk(placeId)
  if (!place) throw new AppError('not_found', 'There is no such place.')
  if (place.retiredAt !== null) throw new AppError('conflict', `${place.name} is retired.`)
  await keepFormerAir(place, await FanHours.findAll({ where: { placeId } }), at)
  await place.update({ airFactor: change.after })
  await stopBeingDemo(place, member)
  await addFactorRow({ scope: 'place', placeId }, change, { member, at })
  await addFoundryEvent(
    { type: 'place', id: placeId, name: place.name },
    {
      kind: change.goesBackOn === null ? 'place calibrated' : 'calibration gone back on',
      by: member,
      at,
      text: `${place.name}: air factor ${changeWords(change)}, from now on.`,
      before: { airFactor: change.before },
      after: { airFactor: change.after },
    },
  )
}

async function setRecessFactor(recessClass: Recess, change: FactorChange, { member, clock }: By): Promise<void> {
  const at = clock.now()
  await addFactorRow({ scope: 'recess', recessClass }, change, { member, at })
  await addFoundryEvent(
    { type: 'foundry' },
    {
      kind: change.goesBackOn === null ? 'recess calibrated' : 'calibration gone back on',
      by: member,
      at,
      text: `Trees with a ${recessClass}: factor ${changeWords(change)}, for coats to come.`,
      before: { recessClass, factor: change.before },
      after: { recessClass, factor: change.after },
    },
  )
}

async function addFactorRow(
  subject: { scope: 'place'; placeId: string } | { scope: 'recess'; recessClass: Recess },
  { before, after, spreadAfter, coatsAfter, goesBackOn }: FactorChange,
  { member, at }: { member: Actor; at: number },
): Promise<void> {
  await Calibration.create({
    id: newId(at),
    ...subject,
    figureBefore: before,
    figureAfter: after,
    spreadAfter,
    coatsAfter,
    memberId: member.id,
    at,
    goesBackOn,
  })
}

/**
 * Goes back on what was taken over: the figure before stands again, of a recipe as a further version, of a place from now on.
 *
 * @returns what was done, in a sentence.
 * @throws {AppError} not_found; conflict when it was gone back on already, a newer one stands on it, or its figure was changed since.
 */
export function goBack(calibrationId: string, by: By): Promise<string> {
  return inTransaction(async () => {
    const { now } = await loadClockNow(await loadFoundry())
    const rows = await loadCalibrationRows()
    const row = rows.find(({ id }) => id === calibrationId)
    if (!row) throw new AppError('not_found', 'There is no such change.')
    if (!canGoBack(rows, now).has(row.id)) {
      throw new AppError('conflict', 'This cannot be gone back on any more: its figure was changed since. Nothing was changed.')
    }
    return restore(row, by)
  })
}

async function restore(row: CalibrationLine, by: By): Promise<string> {
  if (row.recipeId !== null && row.coatNumber !== null) {
    const figure = {
      number: row.coatNumber,
      needAfter: row.figureBefore,
      spreadAfter: row.spreadBefore ?? 0,
      coatsAfter: row.coatsBefore,
    }
    const note = wentBackNote({ number: row.coatNumber, needBefore: row.figureAfter, needAfter: row.figureBefore })
    const { version } = await addCalibratedVersion(row.recipeId, [figure], { follows: null, note, goesBackOn: row.id }, by)
    const onOlder = (await loadMovingTrees({ recipeId: row.recipeId })).filter((tree) => tree.version < version)
    const standing = onOlder.length === 0 ? '' : ` ${nameList(onOlder.map(({ tag }) => tag))} stay on their version until moved.`
    return `Version ${version} of ${row.recipeName ?? 'the recipe'} has the former need of coat ${row.coatNumber}.${standing}`
  }
  // Of the figure that stands again, the row that brought it tells how many coats are behind it.
  const change = { before: row.figureAfter, after: row.figureBefore, spreadAfter: null, coatsAfter: null, goesBackOn: row.id }
  if (row.placeId !== null) {
    await setAirFactor(row.placeId, change, by)
    return `${row.placeName ?? 'The place'} has air factor ${factorWords(row.figureBefore)} again, from now on.`
  }
  if (row.recessClass !== null) await setRecessFactor(row.recessClass, change, by)
  return `Trees with a ${row.recessClass} have factor ${factorWords(row.figureBefore)} again, for coats to come.`
}
