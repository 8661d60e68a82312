import { Icon } from '@/app/_components/icons'
import { useUnits } from '@/app/_components/units-context'
import { careLines } from '@/lib/floor/strip'
import { formatMoment } from '@/lib/format/local-time'
import type { Queue } from '@/lib/queue/contract'

export type FloorAlarmsProps = { queue: Queue; now: number; isConnected: boolean; answeredAt: number }

/** What is wrong with the floor itself, no server, no watcher, each with the time since; and what harms shells as they hang, with the remedy. */
export function FloorAlarms({ queue, now, isConnected, answeredAt }: FloorAlarmsProps) {
  const { timeZone } = queue.foundry
  const { worker } = queue
  const [care, ...others] = careLines(queue.trees, useUnits().temp)
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
      {care && (
        <p className={care.level === 'stop' ? '' : 'floor-alarm-ochre'}>
          <Icon name="warning" />
          <span>
            {care.tags}: {care.text}
            {others.map((other) => ` ${CARE_WORDS[other.code] ?? other.code}: ${other.tags}.`)}
          </span>
        </p>
      )}
    </div>
  )
}

/** What the second and later of them are called; their sentences stand on the trees' own sheets. */
const CARE_WORDS: Readonly<Record<string, string>> = { chill: 'Chill', swing: 'Swing', heat: 'Heat', overdue: 'Hung too long' }
