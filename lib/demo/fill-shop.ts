import { millisecondsInDay } from 'date-fns/constants'
import { recordReadings } from '@/lib/commands/record-readings'
import { actOut } from '@/lib/demo/act-out'
import { DEMO_AIRS } from '@/lib/demo/climate'
import { demoReadings } from '@/lib/demo/drying-room'
import { happenings } from '@/lib/demo/happenings'
import type { DemoShop } from '@/lib/demo/open-shop'
import type { DemoPlan } from '@/lib/demo/plan'

/** Fills an opened shop with the air and the work of a planned past. Takes part in the caller's transaction. */
export async function fillShop(plan: DemoPlan, shop: DemoShop): Promise<void> {
  await storeReadings(plan, shop)
  await actOut(happenings(plan), shop)
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
