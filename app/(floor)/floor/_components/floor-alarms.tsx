import { Icon } from '@/app/_components/icons'
import { formatMoment } from '@/lib/format/local-time'
import type { Queue } from '@/lib/queue/contract'

export type FloorAlarmsProps = { queue: Queue; now: number; isConnected: boolean; answeredAt: number }

/** What is wrong with the floor itself: no server, no watcher. Each with the time since. */
export function FloorAlarms({ queue, now, isConnected, answeredAt }: FloorAlarmsProps) {
  const { timeZone } = queue.foundry
  const { worker } = queue
  return (
    // oxlint-disable-next-line jsx-a11y/prefer-tag-over-role -- an output element takes no blocks
    <div className="floor-alarms" role="status">
      {!isConnected && (
        <p className="floor-alarm-ochre">
          <Icon name="warning" />
          <span>Not connected. What you see is from {formatMoment(answeredAt, now, timeZone)}.</span>
        </p>
      )}
      {!worker.isAlive && (
        <p>
          <Icon name="pulse" />
          <span>
            {worker.pulseAt === null ? 'Watcher has not started' : `Watcher stopped ${formatMoment(worker.pulseAt, now, timeZone)}`}: no
            calls are sent
          </span>
        </p>
      )}
    </div>
  )
}
