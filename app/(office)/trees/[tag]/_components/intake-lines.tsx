import { Icon } from '@/app/_components/icons'
import type { TreeDetail } from '@/lib/trees/detail-contract'

/** The intake for those who may only look: what is ticked and what is open. */
export function IntakeLines({ intake }: { intake: TreeDetail['intake'] }) {
  const lines = [
    [intake.waxSurface !== null, intake.waxSurface === 'etched' ? 'Wax etched' : 'Wax washed'],
    [intake.isWaxAtRoomTemp, 'At room temperature'],
    [intake.isCupFirm, 'Cup and handle firm'],
    [intake.areVentsAndCorePinsIn, 'Vents and core pins in'],
  ] as const
  return (
    <ul className="grid gap-2">
      {lines.map(([isDone, word]) => (
        <li key={word} className="flex gap-2">
          <Icon name={isDone ? 'check' : 'minus'} className={isDone ? 'text-verdigris-ink' : 'text-soot'} />
          {word}: {isDone ? 'yes' : 'open'}
        </li>
      ))}
      <li className="text-soot">A supervisor passes the intake.</li>
    </ul>
  )
}
