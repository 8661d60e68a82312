'use client'

import { Icon } from '@/app/_components/icons'
import { useUnits } from '@/app/_components/units-context'
import type { Warning } from '@/lib/queue/contract'
import { warningText } from '@/lib/queue/warning-text'

/** Warnings in their own sentences, gravest first. */
export function WarningList({ warnings }: { warnings: readonly Warning[] }) {
  const { temp } = useUnits()
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
            <span>{warningText(warning, temp)}</span>
          </li>
        ))}
    </ul>
  )
}
