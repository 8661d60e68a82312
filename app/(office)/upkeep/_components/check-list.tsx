import { Icon } from '@/app/_components/icons'
import type { UpkeepCheck } from '@/lib/upkeep/checks'

/** How each thing of upkeep stands: its mark, the word for it, what was measured, and what to do. */
export function CheckList({ checks }: { checks: readonly UpkeepCheck[] }) {
  return (
    <ul className="upkeep-checks">
      {checks.map(({ key, title, isInOrder, lines, todo }) => (
        <li key={key} data-check={key}>
          <h3>{title}</h3>
          <p className={`state ${isInOrder ? 'state-verdigris' : 'state-furnace'}`}>
            <Icon name={isInOrder ? 'check' : 'warning'} />
            {isInOrder ? 'In order' : 'Look at it'}
          </p>
          <div>
            {lines.map((line) => (
              <p key={line}>{line}</p>
            ))}
            {todo !== '' && <p className="upkeep-todo">{todo}</p>}
          </div>
        </li>
      ))}
    </ul>
  )
}
