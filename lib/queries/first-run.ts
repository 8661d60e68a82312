import type { FirstRunStock } from '@/lib/foundry/first-run'
import { Bath, Place, Sensor } from '@/models'

/** How much of what the steps of the first run leave is there and in use. */
export async function firstRunStock(): Promise<FirstRunStock> {
  const inUse = { retiredAt: null, isDemo: false }
  const [faceBaths, backupBaths, sensors, places] = await Promise.all([
    Bath.count({ where: { ...inUse, kind: 'face' } }),
    Bath.count({ where: { ...inUse, kind: 'backup' } }),
    Sensor.count({ where: inUse }),
    Place.count({ where: inUse }),
  ])
  return { faceBaths, backupBaths, sensors, places }
}
