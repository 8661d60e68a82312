import { holdTree, liftHold } from '@/lib/commands/hold-tree'
import { logDips } from '@/lib/commands/log-dips'
import { lookOver } from '@/lib/commands/look-over'
import { passIntake } from '@/lib/commands/pass-intake'
import { recordEvidence } from '@/lib/commands/record-evidence'
import { recordStir } from '@/lib/commands/record-stir'
import { recordTypedReading } from '@/lib/commands/record-typed-reading'
import { releaseTrees } from '@/lib/commands/release-trees'
import { createTree } from '@/lib/commands/save-tree'
import { scrapTree } from '@/lib/commands/scrap-tree'
import { withdrawEvidence } from '@/lib/commands/withdraw-evidence'
import { newId } from '@/lib/core/ids'
import type { Happening } from '@/lib/demo/happenings'
import type { TaggedTree } from '@/lib/demo/plan'
import type { DemoShop } from '@/lib/demo/open-shop'
import { evidenceAnswer } from '@/lib/trees/evidence-input'

/** Has people do what happened, through the same commands as on a real floor, each at its own moment. */
export async function actOut(list: readonly Happening[], shop: DemoShop): Promise<void> {
  const treeIds = new Map<string, string>()
  const newestEvidence = new Map<string, string>()
  const idOf = (tree: TaggedTree): string => treeIds.get(tree.tag) ?? ''
  for (const happening of list) {
    const { at, by } = happening
    const member = shop.people.get(by)
    if (!member) throw new Error(`Nobody is called ${by}.`)
    const as = { member, clock: { now: () => at } }
    switch (happening.kind) {
      case 'tree added': {
        const { treeId } = await createTree(treeInput(happening.tree, shop), as)
        treeIds.set(happening.tree.tag, treeId)
        break
      }
      case 'intake begun':
        await passIntake(
          idOf(happening.tree),
          { waxSurface: 'washed', isWaxAtRoomTemp: false, isCupFirm: true, areVentsAndCorePinsIn: false },
          as,
        )
        break
      case 'intake':
        await passIntake(
          idOf(happening.tree),
          { waxSurface: 'etched', isWaxAtRoomTemp: true, isCupFirm: true, areVentsAndCorePinsIn: true },
          as,
        )
        break
      case 'run':
        await logDips(dipRun(happening, idOf, shop), as)
        break
      case 'evidence':
        newestEvidence.set(happening.tree.tag, await takeEvidence(happening, idOf(happening.tree), as))
        break
      case 'evidence withdrawn':
        await withdrawEvidence(newestEvidence.get(happening.tree.tag) ?? '', { operationId: newId(at) }, as)
        break
      case 'hold':
        await holdTree(idOf(happening.tree), happening.reason, as)
        break
      case 'lift':
        await liftHold(idOf(happening.tree), happening.reason, as)
        break
      case 'look-over':
        await lookOver(idOf(happening.tree), '', as)
        break
      case 'release': {
        const treeId = idOf(happening.tree)
        await releaseTrees([treeId], { confirmations: { [treeId]: 'weight' } }, as)
        break
      }
      case 'scrap':
        await scrapTree(idOf(happening.tree), happening.reason, as)
        break
      case 'stir':
        await recordStir(shop.bathIds[happening.bath], as)
        break
      case 'reading':
        await recordTypedReading({ operationId: newId(at), sensorId: shop.wallSensorId, ...happening.room }, as)
        break
    }
  }
}

type As = Parameters<typeof recordEvidence>[2]

/** @returns its id. */
async function takeEvidence({ at, coatNumber, evidence }: Happening & { kind: 'evidence' }, treeId: string, as: As): Promise<string> {
  const { response } = await recordEvidence(treeId, { operationId: newId(at), coatNumber, ...evidence }, as)
  return evidenceAnswer.parse(response).evidenceId
}

function treeInput({ tree, tag, pourDate, recessClass, spacing, coats }: TaggedTree, shop: DemoShop): Parameters<typeof createTree>[0] {
  const [cupKind, cupVolumeL] = tree.cup
  return {
    tag,
    recipeVersionId: shop.recipeVersionIds[tree.recipe],
    placeId: shop.placeIds[coats[0]?.place ?? 'longRack'],
    pieces: tree.pieces.map(({ workTitle, sectionName = '', editionNumber, isRecast = false }) => ({
      workTitle: shop.workTitles.get(workTitle) ?? workTitle,
      sectionName,
      editionNumber,
      isRecast,
    })),
    waxMassKg: tree.waxMassKg,
    cupKind,
    cupVolumeL,
    recessClass,
    spacing,
    hungMassKg: tree.hungMassKg ?? null,
    pourDate,
  }
}

function dipRun(
  { at, dips, room }: Happening & { kind: 'run' },
  idOf: (tree: TaggedTree) => string,
  shop: DemoShop,
): Parameters<typeof logDips>[0] {
  const [first] = dips
  if (!first) throw new RangeError('A run needs a tree.')
  const { bath, stucco, way, drainSeconds, dippedAt, roughMinutes } = first.coat
  return {
    operationId: newId(at),
    bathId: shop.bathIds[bath],
    stucco,
    way,
    drainSeconds,
    dippedAt,
    ...(roughMinutes > 0 ? { roughTime: roughMinutes } : {}),
    ...(room ? { room } : {}),
    trees: dips.map(({ tree, coat }) => ({
      treeId: idOf(tree),
      coatNumber: coat.number,
      placeId: shop.placeIds[coat.place],
      ...(coat.reason === null ? {} : { reason: coat.reason }),
    })),
  }
}
