import { beforeAll, expect, it } from 'vitest'
import { logDips } from '@/lib/commands/log-dips'
import { loadQueue } from '@/lib/queries/queue'
import { warningText } from '@/lib/queue/warning-text'
import { buildAir, buildFoundry, buildMember, buildTree, dipBody, HOUR, MINUTE, NOW, stoppedClock } from '@/tests/factories/shell-room'

const sentences = new Map<string, { inDegC: string; inDegF: string }>()

beforeAll(async () => {
  const foundry = await buildFoundry()
  const maud = await buildMember('operator', 'Maud')
  const tree = await buildTree(foundry)
  await buildAir(foundry.sensorId, NOW - 24 * HOUR, NOW - 15 * MINUTE)
  await logDips(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1 }], { dippedAt: NOW - 15 * MINUTE }), {
    member: maud,
    clock: stoppedClock(NOW - 15 * MINUTE),
  })
  // Somebody has turned on a heater.
  await buildAir(foundry.sensorId, NOW - 14 * MINUTE, NOW, { airTempC: 29, relHumidityPct: 20 })
  const { queue } = await loadQueue({ clock: stoppedClock() })
  for (const warning of queue.trees.flatMap(({ warnings }) => warnings)) {
    sentences.set(warning.code, { inDegC: warningText(warning, 'degC'), inDegF: warningText(warning, 'degF') })
  }
})

// 29 °C is 84.2 °F, 26 °C is 78.8 °F; 8 K and 10 K are differences of 14.4 and 18.0 °F: by the definition of the scales.
it('the heat of a room is said in the unit of the reader, with its limit', () => {
  expect(sentences.get('heat')?.inDegC).toContain('The room is at 29.0\u00A0°C, limit 26.0\u00A0°C')
  expect(sentences.get('heat')?.inDegF).toContain('The room is at 84.2\u00A0°F, limit 78.8\u00A0°F')
})

it('a move of the room is a difference: no 32 is added', () => {
  expect(sentences.get('swing')?.inDegC).toContain('The room has moved 8.0\u00A0K up since the dip, limit 2.5\u00A0K')
  expect(sentences.get('swing')?.inDegF).toContain('The room has moved 14.4\u00A0°F up since the dip, limit 4.5\u00A0°F')
})

it('so is the gap to the wet bulb', () => {
  expect(sentences.get('chill')?.inDegC).toMatch(/the wet bulb lies \d+\.\d\u00A0K under the room, limit 10\.0\u00A0K/)
  expect(sentences.get('chill')?.inDegF).toMatch(/the wet bulb lies \d+\.\d\u00A0°F under the room, limit 18\.0\u00A0°F/)
})

it('what has no temperature is the same for all', () => {
  expect(sentences.get('still wet')).toBeDefined()
  expect(sentences.get('still wet')?.inDegF).toBe(sentences.get('still wet')?.inDegC)
})
