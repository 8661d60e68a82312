import { Icon } from '@/app/_components/icons'
import type { Warning } from '@/lib/queue/contract'

/** Warnings in their own sentences, gravest first. */
export function WarningList({ warnings }: { warnings: readonly Warning[] }) {
  if (warnings.length === 0) return null
  const weight = { stop: 0, warn: 1, note: 2 }
  return (
    <ul className="warning-list">
      {warnings
        .toSorted((left, right) => weight[left.level] - weight[right.level])
        .map((warning) => (
          <li
            key={warning.code}
            className={warning.level === 'stop' ? 'text-furnace-ink' : warning.level === 'warn' ? 'text-ochre-ink' : 'text-soot'}
          >
            <Icon name="warning" />
            <span>{warning.text}</span>
          </li>
        ))}
    </ul>
  )
}
