import { addFoundryEvent } from '@/lib/commands/foundry-event'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { fillShop } from '@/lib/demo/fill-shop'
import { openShop, type DemoShop } from '@/lib/demo/open-shop'
import { DEMO_PEOPLE } from '@/lib/demo/people'
import { planDemoAnyhow } from '@/lib/demo/plan'
import { keepDemoTokens } from '@/lib/demo/token-file'
import type { Actor } from '@/lib/members/actor'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { hashRandomPassword } from '@/lib/server/password'
import { inTransaction, Member, Tree } from '@/models'

export type LaidDemo = {
  treeCount: number
  /** False where the foundry's own hours leave no room for two weeks of work: the demo's people keep theirs. */
  isInOwnHours: boolean
  /** What could not keep its name, because the foundry has something of that name. */
  renamed: DemoShop['renamed']
}

/**
 * Lays the demo over a foundry that has no trees yet: its people, who cannot sign in, its sensors, places, baths, recipes and works,
 * and two weeks of air and coats, in the foundry's own zone, altitude and hours. Every row is marked, so that `removeDemo` finds it.
 * All of it or nothing.
 *
 * @throws {AppError} conflict where there are trees, or where the demo is.
 */
export async function layDemo({ member, clock }: { member: Actor; clock: Clock }): Promise<LaidDemo> {
  await refuseUnlessEmpty()
  const now = clock.now()
  const { timeZone, altitudeM, calendar } = await loadFoundry()
  const { plan, isInOwnHours } = planDemoAnyhow(now, { timeZone, altitudeM, calendar })
  const passwordHashes = new Map(await Promise.all(DEMO_PEOPLE.map(async ({ key }) => [key, await hashRandomPassword()] as const)))
  const { shop, laid } = await inTransaction(async () => {
    await refuseUnlessEmpty()
    const opened = await openShop({ createdAt: plan.startsAt, passwordHashes, disabledAt: plan.startsAt })
    await fillShop(plan, opened)
    await addFoundryEvent(
      { type: 'demo' },
      { kind: 'demo data laid', by: member, at: now, text: `Demo data laid: ${plan.trees.length} trees.` },
    )
    return { shop: opened, laid: { treeCount: plan.trees.length, isInOwnHours, renamed: opened.renamed } }
  })
  await keepDemoTokens(shop.sensorTokens)
  return laid
}

async function refuseUnlessEmpty(): Promise<void> {
  if ((await Member.count({ where: { isDemo: true } })) > 0) throw new AppError('conflict', 'The demo data is here already.')
  if ((await Tree.count()) > 0) throw new AppError('conflict', 'There are trees here already: demo data is only for a floor without any.')
}
