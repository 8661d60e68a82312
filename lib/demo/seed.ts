import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { fillShop } from '@/lib/demo/fill-shop'
import { openShop, type DemoShop } from '@/lib/demo/open-shop'
import { DEMO_PEOPLE, DEMO_SIGN_INS, type DemoPersonKey, type DemoSignIn } from '@/lib/demo/people'
import { planDemo } from '@/lib/demo/plan'
import { DEMO_NAME, DEMO_SETTING } from '@/lib/demo/shop'
import { hashPassword, hashRandomPassword } from '@/lib/server/password'
import { Foundry, inTransaction, ShiftHours } from '@/models'

export type SeededDemo = { signIns: DemoSignIn[]; sensorTokens: DemoShop['sensorTokens'] }

/**
 * Fills an empty database with the demo foundry: two weeks of air and of work, run through the same commands as on a real floor,
 * laid so that at `clock.now()` there is a tree in every state. All of it or nothing.
 *
 * @param scryptCost a test may lower it.
 * @throws {AppError} conflict when the database holds a foundry already.
 */
export async function seedDemo({ clock, scryptCost }: { clock: Clock; scryptCost?: number }): Promise<SeededDemo> {
  await refuseSecondFoundry()
  const plan = planDemo(clock.now(), DEMO_SETTING)
  const passwordHashes = await hashPasswords(scryptCost)
  return inTransaction(async () => {
    await refuseSecondFoundry()
    const createdAt = plan.startsAt
    const { timeZone, altitudeM, calendar } = DEMO_SETTING
    await Foundry.create({ id: 1, name: DEMO_NAME, timeZone, altitudeM, isDemo: true, setUpAt: createdAt, createdAt })
    await ShiftHours.bulkCreate([...calendar.hours])
    const shop = await openShop({ createdAt, passwordHashes })
    await fillShop(plan, shop)
    return { signIns: [...DEMO_SIGN_INS], sensorTokens: shop.sensorTokens }
  })
}

async function refuseSecondFoundry(): Promise<void> {
  if (await Foundry.findByPk(1)) throw new AppError('conflict', 'This database holds a foundry already: the demo is only for an empty one.')
}

async function hashPasswords(cost: number | undefined): Promise<Map<DemoPersonKey, string>> {
  const hashes = await Promise.all(
    DEMO_PEOPLE.map(async ({ key, password }): Promise<[DemoPersonKey, string]> => {
      const hash = password === null ? await hashRandomPassword() : await hashPassword(password, cost)
      return [key, hash]
    }),
  )
  return new Map(hashes)
}
