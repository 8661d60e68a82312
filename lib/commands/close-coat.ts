import { settleCoat, unsettleCoat } from '@/lib/commands/settle-coat'
import type { CoatCall } from '@/lib/drying/types'
import { humidityOf } from '@/lib/room/climate'
import type { CoatFacts, TreeFacts } from '@/lib/trees/facts'
import { airAround, type FloorContext } from '@/lib/trees/spans'
import { Coat } from '@/models'

/**
 * Writes down how a coat dried, at the moment it is dipped over or the tree is released.
 *
 * @returns the coat as it is covered.
 */
export async function closeCoat(
  coat: CoatFacts,
  tree: TreeFacts,
  context: FloorContext,
  { at, call }: { at: number; call: CoatCall },
): Promise<CoatFacts> {
  const humidity = humidityOf(airAround(context, tree.stays, coat.dippedAt, at))
  const moistureRatioAtRedip = call.isUnknown && call.dose.likely === 0 ? null : call.moistureRatio
  await Coat.update(
    {
      coveredAt: at,
      meanRelHumidityPct: humidity?.meanPct ?? null,
      worstRelHumidityPct: humidity?.worstPct ?? null,
      moistureRatioAtRedip,
    },
    { where: { id: coat.id } },
  )
  return settleCoat(tree, { ...coat, coveredAt: at, moistureRatioAtRedip }, context)
}

/** Undoes it: the coat is the newest again and its clock resumes. */
export async function reopenCoat(coatId: string): Promise<void> {
  await Coat.update(
    { coveredAt: null, meanRelHumidityPct: null, worstRelHumidityPct: null, moistureRatioAtRedip: null },
    { where: { id: coatId } },
  )
  await unsettleCoat(coatId)
}
