import { moveTree } from '@/lib/commands/move-tree'
import { openTree } from '@/lib/commands/open-tree'
import { refuseField } from '@/lib/commands/refuse-field'
import { retiredBaths } from '@/lib/commands/retired-baths'
import { settleAnew } from '@/lib/commands/settle-anew'
import { addTreeEvent } from '@/lib/commands/tree-event'
import type { Clock } from '@/lib/core/clock'
import { newId } from '@/lib/core/ids'
import { SECTION_FACTOR } from '@/lib/drying/need'
import { isSameName } from '@/lib/format/same-name'
import type { Actor } from '@/lib/members/actor'
import { loadRecessFactors } from '@/lib/queries/recess-factors'
import type { TreeInput } from '@/lib/trees/tree-input'
import { Coat, inTransaction, Piece, Place, RecipeVersion, Section, Tree, TreePiece, TreePlace, Work } from '@/models'

type By = { member: Actor; clock: Clock }

/**
 * Adds a tree with its pieces, hung at its place.
 *
 * @throws {AppError} conflict with `fields` when the tag was used before, an edition is taken, or recipe, bath or place is not in use.
 */
export function createTree(input: TreeInput, { member, clock }: By): Promise<{ treeId: string; tag: string }> {
  return inTransaction(async () => {
    const now = clock.now()
    if (await Tree.findOne({ where: { tag: input.tag } })) {
      refuseField('tag', `${input.tag} was used before: a tag is for one tree, for ever.`)
    }
    await requireRecipeAndPlace(input, null)
    const { pieces, placeId, ...columns } = input
    const treeId = newId(now)
    await Tree.create({ ...columns, id: treeId, isDemo: member.isDemo ?? false, createdBy: member.id, createdAt: now, updatedAt: now })
    await TreePlace.create({ id: newId(now), treeId, placeId, since: now, memberId: member.id })
    for (const [index, piece] of pieces.entries()) {
      await TreePiece.create({ treeId, pieceId: await addPiece(piece, index, { member, now }) })
    }
    await addTreeEvent(treeId, 'tree added', { by: member, at: now, text: 'Tree added.' })
    return { treeId, tag: input.tag }
  })
}

/**
 * Changes a tree. With a coat on, its recipe and its pieces stand. A recess or a spacing that was noticed late is corrected, and the
 * needs of its coats with it: the call follows the slowest spot of the tree.
 *
 * @throws {AppError} not_found; conflict with `fields` for what may no longer change.
 */
export function editTree(treeId: string, input: TreeInput, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const now = clock.now()
    const tree = await openTree(treeId)
    await requireRecipeAndPlace(input, tree.recipeVersionId)
    if (input.tag !== tree.tag) refuseField('tag', `This tree is ${tree.tag} for ever.`)
    const coatsOn = await Coat.count({ where: { treeId, withdrawnAt: null } })
    if (coatsOn > 0 && input.recipeVersionId !== tree.recipeVersionId) {
      refuseField(
        'recipeVersionId',
        'This stands from the first coat on. A tree is moved to a newer version of its recipe on its own page.',
      )
    }
    const isOtherShape = input.recessClass !== tree.recessClass || input.spacing !== tree.spacing
    await correctNeeds(tree, input)
    const { pieces, placeId, ...columns } = input
    const before = Object.fromEntries(Object.keys(columns).map((key) => [key, tree.get(key)]))
    await tree.update({ ...columns, updatedAt: now })
    if (isOtherShape) await settleAnew(treeId, null, now)
    await moveTree(treeId, placeId, { member, clock })
    if (coatsOn === 0) await changePieces(treeId, pieces, { member, now })
    await addTreeEvent(treeId, 'tree edited', { by: member, at: now, text: 'Tree edited.', before, after: columns })
  })
}

/** Of every coat that is on: when the newest is taken back the one below dries on, and it has the same recess. */
async function correctNeeds(tree: Tree, { recessClass, spacing }: TreeInput): Promise<void> {
  if (recessClass === tree.recessClass && spacing === tree.spacing) return
  const recessFactors = await loadRecessFactors()
  for (const coat of await Coat.findAll({ where: { treeId: tree.id, withdrawnAt: null } })) {
    const recessFactor = recessClass === tree.recessClass ? coat.recessFactor : recessFactors[recessClass]
    const ratio = (recessFactor / coat.recessFactor) * (SECTION_FACTOR[spacing] / SECTION_FACTOR[tree.spacing])
    await coat.update({ needReferenceHours: coat.needReferenceHours * ratio, recessFactor })
  }
}

/** A tree keeps the version that it stands on, also when its recipe is retired; a retired one, or one with a retired bath, is not chosen anew. */
async function requireRecipeAndPlace(input: TreeInput, standsOn: string | null): Promise<void> {
  const version = await RecipeVersion.findByPk(input.recipeVersionId, { include: { association: 'recipe' } })
  if (!version?.recipe) refuseField('recipeVersionId', 'There is no such recipe.')
  if (version.id !== standsOn) {
    if (version.recipe.retiredAt !== null) refuseField('recipeVersionId', `${version.recipe.name} is retired: choose a recipe in use.`)
    const refusal = await retiredBaths(version.id)
    if (refusal !== null) refuseField('recipeVersionId', refusal)
  }
  const place = await Place.findByPk(input.placeId)
  if (!place || place.retiredAt !== null) refuseField('placeId', 'There is no such place.')
}

/** A piece that did not change stays the casting it is: it may have been recast since, and then it could not be made anew. */
async function changePieces(treeId: string, pieces: TreeInput['pieces'], by: { member: Actor; now: number }): Promise<void> {
  const rows = await TreePiece.findAll({ where: { treeId } })
  const former = await Piece.findAll({
    where: { id: rows.map(({ pieceId }) => pieceId) },
    include: { association: 'section', include: [{ association: 'work' }] },
  })
  const added: [TreeInput['pieces'][number], number][] = []
  for (const [index, piece] of pieces.entries()) {
    const same = former.findIndex((candidate) => isSamePiece(candidate, piece))
    if (same === -1) added.push([piece, index])
    else former.splice(same, 1)
  }
  for (const { id } of former) {
    await TreePiece.destroy({ where: { treeId, pieceId: id } })
    const recasts = await Piece.count({ where: { recastOf: id } })
    if (recasts === 0) await Piece.destroy({ where: { id } })
  }
  for (const [piece, index] of added) await TreePiece.create({ treeId, pieceId: await addPiece(piece, index, by) })
}

function isSamePiece({ section, editionNumber, recastOf }: Piece, input: TreeInput['pieces'][number]): boolean {
  return (
    isSameName(section?.work?.title ?? '', input.workTitle) &&
    isSameName(section?.name ?? '', input.sectionName) &&
    editionNumber === input.editionNumber &&
    (recastOf !== null) === input.isRecast
  )
}

/** One casting of a section; the work and the section are made when they are new. */
async function addPiece(
  input: TreeInput['pieces'][number],
  index: number,
  { member, now }: { member: Actor; now: number },
): Promise<string> {
  const work =
    (await Work.findAll()).find(({ title }) => isSameName(title, input.workTitle)) ??
    (await Work.create({ id: newId(now), title: input.workTitle, isDemo: member.isDemo ?? false, createdAt: now }))
  const section =
    (await Section.findAll({ where: { workId: work.id } })).find(({ name }) => isSameName(name, input.sectionName)) ??
    (await Section.create({ id: newId(now), workId: work.id, name: input.sectionName }))
  const casts = await Piece.findAll({ where: { sectionId: section.id, editionNumber: input.editionNumber }, order: [['createdAt', 'ASC']] })
  const title = [work.title, section.name].filter(Boolean).join(', ')
  const field = `pieces.${index}.editionNumber`
  if (work.editionSize !== null && input.editionNumber > work.editionSize) {
    refuseField(field, `${work.title} is an edition of ${work.editionSize}: there is no number ${input.editionNumber}.`)
  }
  if (!input.isRecast && casts.length > 0) {
    refuseField(field, `Edition ${input.editionNumber} of ${title} exists already. Tick 'recast' if this replaces it.`)
  }
  if (input.isRecast && casts.length === 0) refuseField(field, `There is no edition ${input.editionNumber} of ${title} to recast.`)
  const id = newId(now)
  await Piece.create({ id, sectionId: section.id, editionNumber: input.editionNumber, recastOf: casts.at(-1)?.id ?? null, createdAt: now })
  return id
}
