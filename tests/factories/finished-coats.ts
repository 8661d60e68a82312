import type { RecessClass, Stucco } from '@/lib/coats/vocabulary'
import { newId } from '@/lib/core/ids'
import { Coat, Operation, RecipeCoat, TreePlace } from '@/models'
import { buildTree, HOUR, NOW, type TestFoundry } from '@/tests/factories/shell-room'

type FinishedCoat = Partial<{
  number: number
  /** Null: nobody took anything. */
  theta: number | null
  sd: number
  placeId: string
  recessClass: RecessClass
  stucco: Stucco
  deviations: string[]
  roughMinutes: number
  moistureRatioBelow: number
  gapShare: number
  airChangedAt: number
  dryAt: number | null
}>

/** Covered coats of a recipe, each on a tree of its own, with what their evidence says: dry half an hour after the likely time. */
export async function buildFinishedCoats(
  { foundry, memberId, recipeVersionId, count }: { foundry: TestFoundry; memberId: string; recipeVersionId: string; count: number },
  { number = 2, theta = 0.12, sd = 0.08, placeId = foundry.placeId, recessClass = 'none', ...rest }: FinishedCoat,
): Promise<void> {
  const planned = await RecipeCoat.findOne({ where: { recipeVersionId, number }, rejectOnEmpty: true })
  for (let index = 0; index < count; index += 1) {
    const tree = await buildTree(foundry, { recipeVersionId, recessClass, placeId })
    const operationId = newId()
    await Operation.create({ operationId, kind: 'dips', memberId, bodyHash: 'x'.repeat(64), status: 201, response: {}, createdAt: NOW })
    const dippedAt = NOW - 30 * HOUR + index * 60_000
    const recessFactor = { none: 1, 'deep recess': 1.6, 'closed core': 2.5, 'closed core, no duct': 3 }[recessClass]
    await TreePlace.update({ since: dippedAt - HOUR }, { where: { treeId: tree.id } })
    await Coat.create({
      id: newId(dippedAt),
      treeId: tree.id,
      number,
      operationId,
      kind: planned.kind,
      bathId: planned.bathId,
      stucco: rest.stucco ?? planned.stucco,
      way: 'dip',
      drainSeconds: 60,
      dippedAt,
      roughMinutes: rest.roughMinutes ?? 0,
      placeId,
      loggedBy: memberId,
      loggedAt: dippedAt,
      deviations: rest.deviations ?? [],
      needReferenceHours: planned.needReferenceHours * recessFactor,
      moistureRatioBelow: rest.moistureRatioBelow ?? 0,
      moistureTarget: planned.moistureTarget,
      recipeReferenceHours: planned.needReferenceHours,
      recessFactor,
      forecastP10At: dippedAt + 3 * HOUR,
      forecastP50At: dippedAt + 4 * HOUR,
      forecastP90At: dippedAt + 6 * HOUR,
      coveredAt: dippedAt + 20 * HOUR + index * 1000,
      moistureRatioAtRedip: 0.05,
      ...(theta === null
        ? {}
        : {
            outcomeTheta: theta,
            outcomeSd: sd,
            outcomeDryAt: rest.dryAt === undefined ? dippedAt + 4.5 * HOUR : rest.dryAt,
            outcomeGapShare: rest.gapShare ?? 0,
          }),
      airChangedAt: rest.airChangedAt ?? null,
    })
  }
}
