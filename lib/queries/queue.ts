import { stubPlaces, stubScene, stubTrees, STUB_NOW } from '@/lib/queries/office-stub'
import type { Clock } from '@/lib/core/clock'
import type { Queue } from '@/lib/queue/contract'

export function loadQueue(_options: { clock: Clock }): Promise<{ etag: string; queue: Queue }> {
  const queue: Queue = {
    now: STUB_NOW,
    foundry: { name: 'Marram Lane Art Foundry', timeZone: 'Europe/London', isDemo: true, isDemoFeedOn: true },
    shift: { isOpen: true, endsAt: STUB_NOW + 7_200_000, nextStartsAt: STUB_NOW + 57_600_000, nextEndsAt: STUB_NOW + 90_000_000 },
    rooms: [],
    baths: [],
    places: stubPlaces.map((place) => ({ ...place, sensorId: 1, needsTypedReading: false })),
    worker: { pulseAt: STUB_NOW, isAlive: true },
    trees: stubTrees().filter((tree) => tree.state !== 'released' && tree.state !== 'scrapped'),
  }
  return Promise.resolve({ etag: stubScene(), queue })
}
