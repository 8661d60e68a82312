import { beforeAll, describe, expect, it } from 'vitest'
import { dipRunAnswer } from '@/lib/coats/dip-contract'
import { logDips } from '@/lib/commands/log-dips'
import { createTree, editTree } from '@/lib/commands/save-tree'
import { undoDips } from '@/lib/commands/undo-dips'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { loadFacts } from '@/lib/queries/load-facts'
import { treeInput, type TreeInput } from '@/lib/trees/tree-input'
import { Coat, Piece, Tree, TreePiece } from '@/models'
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

describe('editing a tree', () => {
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
