import { Icon } from '@/app/_components/icons'
import { KeyLink } from '@/app/_components/key'
import { ShellSection } from '@/app/_components/shell-section'
import type { SetUpLine } from '@/lib/floor/set-up'
import type { BandGrade } from '@/lib/trees/section'
import './no-trees.css'

const RECIPE: BandGrade[] = ['fine', 'fine', 'medium', 'medium', 'coarse', 'coarse', 'coarse', 'seal']

/** The floor before its first tree: what will stand here, who may begin, and what the room still lacks. */
export function NoTrees({ canAdd, setUp }: { canAdd: boolean; setUp: readonly SetUpLine[] }) {
  return (
    <main className={`no-trees${setUp.length > 0 ? ' has-set-up' : ''}`}>
      <div className="no-trees-words">
        <h2>No trees on the floor yet</h2>
        <p>
          {canAdd
            ? 'Add the first tree and it shows here: bare wax on the left, coats to come in dashes.'
            : 'A supervisor adds the first tree; then it shows here: bare wax on the left, coats to come in dashes.'}{' '}
          Look the wax over and it becomes Wax ready.
        </p>
        <ShellSection
          coats={RECIPE.map((grade) => ({ grade }))}
          done={0}
          open={null}
          state="bare"
          target={0.9}
          height={104}
          width={700}
          className="h-auto max-w-full"
          label="Bare wax with eight coats to come."
        />
        {canAdd && (
          <KeyLink href="/trees/new" size={80} tone="go" icon="plus" className="text-32">
            Add the first tree
          </KeyLink>
        )}
      </div>
      {setUp.length > 0 && (
        <section className="set-up" aria-labelledby="set-up">
          <h2 id="set-up">Set up the shell room</h2>
          <ol>
            {setUp.map((line, index) => (
              <li key={line.title}>
                <span className={`set-up-mark${line.isDone ? ' is-done' : ''}`}>
                  {line.isDone ? (
                    <>
                      <Icon name="check" />
                      <span className="vh">Done:</span>
                    </>
                  ) : (
                    index + 1
                  )}
                </span>
                <span className="set-up-words">
                  <b>{line.title}</b>
                  {line.words}
                </span>
                {line.href !== null && (
                  <KeyLink href={line.href} size={64}>
                    {line.isDone ? 'See' : 'Add'}
                    <span className="vh"> {line.title}</span>
                  </KeyLink>
                )}
              </li>
            ))}
          </ol>
        </section>
      )}
    </main>
  )
}
