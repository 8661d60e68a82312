import { KeyLink } from '@/app/_components/key'
import { ShellSection } from '@/app/_components/shell-section'
import type { BandGrade } from '@/lib/trees/section'

const RECIPE: BandGrade[] = ['fine', 'fine', 'medium', 'medium', 'coarse', 'coarse', 'coarse', 'seal']

/** The floor before its first tree: what will stand here, and who may begin. */
export function NoTrees({ canAdd }: { canAdd: boolean }) {
  return (
    <main className="no-trees">
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
          Add a tree
        </KeyLink>
      )}
    </main>
  )
}
