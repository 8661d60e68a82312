import { randomBytes } from 'node:crypto'
import { millisecondsInDay } from 'date-fns/constants'
import { recordReadings } from '@/lib/commands/record-readings'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { actOut } from '@/lib/demo/act-out'
import { DEMO_AIRS } from '@/lib/demo/climate'
import { demoReadings } from '@/lib/demo/drying-room'
import { happenings } from '@/lib/demo/happenings'
import { DEMO_PEOPLE, DEMO_SIGN_INS, type DemoPersonKey, type DemoSignIn } from '@/lib/demo/people'
import { planDemo, type DemoPlan } from '@/lib/demo/plan'
import { openShop, type DemoShop } from '@/lib/demo/open-shop'
import { hashPassword } from '@/lib/server/password'
import { Foundry, inTransaction } from '@/models'

const LOW_COST = 1024

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
  const plan = planDemo(clock.now())
  const passwordHashes = await hashPasswords(scryptCost)
  return inTransaction(async () => {
    await refuseSecondFoundry()
    const shop = await openShop({ createdAt: plan.startsAt, passwordHashes })
    await storeReadings(plan, shop)
    await actOut(happenings(plan), shop)
    return { signIns: [...DEMO_SIGN_INS], sensorTokens: shop.sensorTokens }
  })
}

async function refuseSecondFoundry(): Promise<void> {
  if (await Foundry.findByPk(1)) throw new AppError('conflict', 'This database holds a foundry already: the demo is only for an empty one.')
}

async function hashPasswords(cost: number | undefined): Promise<Map<DemoPersonKey, string>> {
  const hashes = await Promise.all(
    DEMO_PEOPLE.map(async ({ key, password }): Promise<[DemoPersonKey, string]> => {
      // Nobody knows the password of those who are there for company; it is too long to guess, whatever the cost of a guess.
      const hash =
        password === null ? await hashPassword(randomBytes(32).toString('base64url'), LOW_COST) : await hashPassword(password, cost)
      return [key, hash]
    }),
  )
  return new Map(hashes)
}

/** A day at a time, as they came in. */
async function storeReadings({ climate, startsAt, now }: DemoPlan, shop: DemoShop): Promise<void> {
  for (const air of DEMO_AIRS) {
    const readings = demoReadings(climate, air, { from: startsAt, to: now, now })
    for (let from = startsAt; from <= now; from += millisecondsInDay) {
      const to = Math.min(now, from + millisecondsInDay - 1)
      const rows = readings.filter(({ measuredAt }) => measuredAt >= from && measuredAt <= to)
      await recordReadings({ sensorId: shop.sensorIds[air], source: 'sensor', enteredBy: null, rows }, { clock: { now: () => to } })
    }
  }
}
