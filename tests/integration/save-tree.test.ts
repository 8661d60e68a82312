import { beforeAll, describe, expect, it } from 'vitest'
import { dipRunAnswer } from '@/lib/coats/dip-contract'
import { logDips } from '@/lib/commands/log-dips'
import { createTree, editTree } from '@/lib/commands/save-tree'
import { editWork } from '@/lib/commands/save-work'
import { undoDips } from '@/lib/commands/undo-dips'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { loadFacts } from '@/lib/queries/load-facts'
import { treeInput, type TreeInput } from '@/lib/trees/tree-input'
import { Bath, Coat, Piece, Recipe, RecipeVersion, Section, Tree, TreePiece, Work } from '@/models'
import {
  buildAir,
  buildFoundry,
  buildMember,
  buildRecipe,
  dipBody,
  HOUR,
  NOW,
  stoppedClock,
  type TestFoundry,
} from '@/tests/factories/shell-room'

let foundry: TestFoundry
let ines: Actor
let recipeVersionId: string

beforeAll(async () => {
  foundry = await buildFoundry()
  ines = await buildMember('supervisor', 'Ines')
  recipeVersionId = await buildRecipe(foundry)
  await buildAir(foundry.sensorId, NOW - 2 * HOUR, NOW)
})

let tags = 500
const input = (overrides: Partial<TreeInput> = {}): TreeInput => ({
  ...treeInput.parse({
    tag: `T-${(tags += 1)}`,
    recipeVersionId,
    placeId: foundry.placeId,
    pieces: [{ workTitle: 'Otter Gate', sectionName: `panel ${tags}`, editionNumber: '1', isRecast: false }],
    waxMassKg: '2,4',
    cupKind: 'wax',
    cupVolumeL: '0.3',
    recessClass: 'none',
    spacing: 'open',
    hungMassKg: '',
    pourDate: '',
  }),
  ...overrides,
})
const by = () => ({ member: ines, clock: stoppedClock() })

describe('adding a tree', () => {
  it('takes a decimal comma and leaves an empty field open', async () => {
    const { treeId } = await createTree(input(), by())
    expect(await Tree.findByPk(treeId)).toMatchObject({ waxMassKg: 2.4, hungMassKg: null, pourDate: null })
  })

  it('refuses a tag that was ever used, beside its field', async () => {
    const first = input()
    await createTree(first, by())
    await expect(createTree(input({ tag: first.tag }), by())).rejects.toMatchObject({
      code: 'conflict',
      extra: { fields: [{ path: 'tag' }] },
    })
  })

  it('refuses an edition that exists, and lets it be cast again', async () => {
    const first = input()
    const { treeId } = await createTree(first, by())
    const again = input({ pieces: first.pieces })
    await expect(createTree(again, by())).rejects.toMatchObject({ extra: { fields: [{ path: 'pieces.0.editionNumber' }] } })
    expect(await Tree.findOne({ where: { tag: again.tag } })).toBeNull()
    const recast = await createTree({ ...again, pieces: first.pieces.map((piece) => ({ ...piece, isRecast: true })) }, by())
    const pieceOf = async (id: string) => (await TreePiece.findOne({ where: { treeId: id }, rejectOnEmpty: true })).pieceId
    expect(await Piece.findByPk(await pieceOf(recast.treeId))).toMatchObject({ recastOf: await pieceOf(treeId) })
  })
})

const piece = (workTitle: string, sectionName: string, editionNumber: number, isRecast = false) => ({
  workTitle,
  sectionName,
  editionNumber,
  isRecast,
})
const pieceIdsOf = async (treeId: string) => (await TreePiece.findAll({ where: { treeId } })).map(({ pieceId }) => pieceId)

describe('the work of a piece', () => {
  it('is found in whatever capitals, and so is its section: its edition keeps its size', async () => {
    await createTree(input({ pieces: [piece('The Swimmer', 'Left arm', 1)] }), by())
    await createTree(input({ pieces: [piece('the swimmer', 'left ARM', 2)] }), by())
    const works = (await Work.findAll()).filter(({ title }) => title.toLowerCase() === 'the swimmer')
    expect(works.map(({ title }) => title)).toEqual(['The Swimmer'])
    expect(await Section.count({ where: { workId: works[0]!.id } })).toBe(1)
    await editWork(works[0]!.id, { title: 'The Swimmer', editionSize: 2 }, by())
    await expect(createTree(input({ pieces: [piece('THE SWIMMER', 'Left arm', 3)] }), by())).rejects.toThrow(/edition of 2/)
    await expect(createTree(input({ pieces: [piece('the swimmer', 'left arm', 1)] }), by())).rejects.toThrow(
      /Edition 1 of The Swimmer, Left arm/,
    )
  })
})

describe('the recipe of a tree', () => {
  it('is not one that is retired, nor one with a retired bath, unless the tree stands on it', async () => {
    const bath = await Bath.create({ id: newId(), name: 'Old slurry', kind: 'backup', createdAt: NOW })
    const onIt = await buildRecipe({ ...foundry, backupBathId: bath.id })
    const first = input({ recipeVersionId: onIt })
    const { treeId } = await createTree(first, by())
    const other = await createTree(input(), by())
    await bath.update({ retiredAt: NOW })
    const refusal = {
      extra: { fields: [{ path: 'recipeVersionId', message: 'Old slurry is retired: take it into use again first.' }] },
    }
    await expect(createTree(input({ recipeVersionId: onIt }), by())).rejects.toMatchObject(refusal)
    const { tag } = (await Tree.findByPk(other.treeId))!
    await expect(editTree(other.treeId, input({ tag, recipeVersionId: onIt }), by())).rejects.toMatchObject(refusal)
    await editTree(treeId, { ...first, waxMassKg: 3 }, by())

    await bath.update({ retiredAt: null })
    const { recipeId } = (await RecipeVersion.findByPk(onIt))!
    await Recipe.update({ retiredAt: NOW }, { where: { id: recipeId } })
    await expect(createTree(input({ recipeVersionId: onIt }), by())).rejects.toThrow(/is retired: choose a recipe in use/)
    await editTree(treeId, { ...first, waxMassKg: 4 }, by())
    expect(await Tree.findByPk(treeId)).toMatchObject({ waxMassKg: 4 })
  })
})

describe('editing a tree', () => {
  it('leaves the pieces that did not change, also one that was recast elsewhere', async () => {
    const first = input({ pieces: [piece('Tide Bell', 'clapper', 1), piece('Tide Bell', 'crown', 1)] })
    const { treeId } = await createTree(first, by())
    const before = await pieceIdsOf(treeId)
    const recast = await createTree(input({ pieces: [piece('Tide Bell', 'clapper', 1, true)] }), by())
    await editTree(treeId, { ...first, waxMassKg: 5 }, by())
    expect(await Tree.findByPk(treeId)).toMatchObject({ waxMassKg: 5 })
    expect((await pieceIdsOf(treeId)).toSorted()).toEqual(before.toSorted())

    // One piece goes, another comes; the recast one stays what it is.
    await editTree(treeId, { ...first, pieces: [piece('Tide Bell', 'clapper', 1), piece('Tide Bell', 'mouth', 1)] }, by())
    const after = await pieceIdsOf(treeId)
    expect(after.filter((id) => before.includes(id))).toHaveLength(1)
    const [recastId] = await pieceIdsOf(recast.treeId)
    expect(after).toContain((await Piece.findByPk(recastId))!.recastOf)
    expect(await Piece.count({ where: { id: before } })).toBe(1)
    await expect(
      editTree(treeId, { ...first, pieces: [piece('Tide Bell', 'mouth', 1), piece('Tide Bell', 'clapper', 9, true)] }, by()),
    ).rejects.toMatchObject({ extra: { fields: [{ path: 'pieces.1.editionNumber' }] } })
  })

  it('keeps its tag, and its recipe once a coat is on', async () => {
    const first = input()
    const { treeId } = await createTree(first, by())
    await expect(editTree(treeId, { ...first, tag: 'T-9' }, by())).rejects.toMatchObject({ extra: { fields: [{ path: 'tag' }] } })
    await logDips(dipBody(foundry, [{ treeId, coatNumber: 1 }]), by())
    const other = await buildRecipe(foundry)
    await expect(editTree(treeId, { ...first, recipeVersionId: other }, by())).rejects.toMatchObject({
      extra: { fields: [{ path: 'recipeVersionId' }] },
    })
  })

  it('makes the newest coat wait for a recess that was noticed late', async () => {
    const first = input()
    const { treeId } = await createTree(first, by())
    await logDips(dipBody(foundry, [{ treeId, coatNumber: 1 }]), by())
    await editTree(treeId, { ...first, recessClass: 'closed core', spacing: 'crowded' }, by())
    const coat = await Coat.findOne({ where: { treeId }, rejectOnEmpty: true })
    expect(coat.needReferenceHours).toBeCloseTo(2.5 * 2.5 * 1.25, 9)
  })

  it('makes the coat below wait as well when the newest is taken back after it', async () => {
    const first = input()
    const { treeId } = await createTree(first, by())
    await logDips(dipBody(foundry, [{ treeId, coatNumber: 1 }], { dippedAt: NOW - HOUR }), by())
    const { response } = await logDips(dipBody(foundry, [{ treeId, coatNumber: 2 }]), by())
    await editTree(treeId, { ...first, recessClass: 'closed core' }, by())
    const coatIds = dipRunAnswer.parse(response).coats.map((coat) => coat.coatId)
    await undoDips({ operationId: newId(), coatIds }, by())
    const [below] = (await loadFacts({ ids: [treeId] }))[0]!.coats
    expect(below!.needReferenceHours).toBeCloseTo(2.5 * 2.5, 9)
  })
})
