import type { Clock } from '@/lib/core/clock'
import { inTransaction, Sensor } from '@/models'

/** A battery that says the same is noted anew after this long; a clock that wanders by less is the same. */
const NOTED_EVERY_MS = 3_600_000
const SAME_CLOCK_SECONDS = 60

export type SenderNote = {
  batteryPct: number | undefined
  /** As `senderClock` has it; undefined leaves what is known. */
  clockOffsetSeconds: number | null | undefined
}

/** Keeps what a sender told of itself with its sensor. Without effect where nothing has changed. */
export async function noteSender(
  sensorId: number,
  { batteryPct, clockOffsetSeconds }: SenderNote,
  { clock }: { clock: Clock },
): Promise<void> {
  if (batteryPct === undefined && clockOffsetSeconds === undefined) return
  const now = clock.now()
  const sensor = await Sensor.findByPk(sensorId, { rejectOnEmpty: true })
  const isBatteryNew =
    batteryPct !== undefined && (sensor.batteryPct !== batteryPct || Math.abs(now - (sensor.batteryAt ?? 0)) >= NOTED_EVERY_MS)
  const isClockNew = clockOffsetSeconds !== undefined && !isSameClock(sensor.clockOffsetSeconds ?? null, clockOffsetSeconds)
  if (!isBatteryNew && !isClockNew) return
  await inTransaction(() =>
    Sensor.update(
      { ...(isBatteryNew && { batteryPct, batteryAt: now }), ...(isClockNew && { clockOffsetSeconds }) },
      { where: { id: sensorId } },
    ),
  )
}

function isSameClock(known: number | null, told: number | null): boolean {
  if (known === null || told === null) return known === told
  return Math.abs(known - told) < SAME_CLOCK_SECONDS
}
