'use client'

import { useState } from 'react'
import { Icon } from '@/app/_components/icons'
import { Key, KeyLink } from '@/app/_components/key'
import { ShellSection } from '@/app/_components/shell-section'
import { takeStarterRecipesAction } from '@/app/(first-run)/first-run/actions'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { NOT_CALIBRATED } from '@/lib/format/time-pair'
import { STARTER_RECIPES, type StarterKey, type StarterRecipe } from '@/lib/recipes/starter-recipes'

/** The recipes to begin with; those that are ticked are taken. */
export function StarterForm({ taken }: { taken: readonly StarterKey[] }) {
  const form = useKeptForm(takeStarterRecipesAction)
  const open = STARTER_RECIPES.filter(({ key }) => !taken.includes(key))
  const [ticked, setTicked] = useState<readonly StarterKey[]>(() => open.map(({ key }) => key))
  const count = ticked.length
  return (
    <form {...form.formProps} className="grid gap-5">
      <ul className="starter-list">
        {STARTER_RECIPES.map((recipe) => (
          <li key={recipe.key}>
            {taken.includes(recipe.key) ? (
              <div className="starter-row">
                <Icon name="check" className="starter-taken" />
                <StarterWords recipe={recipe} line="Taken." />
              </div>
            ) : (
              <label className="starter-row">
                <input
                  type="checkbox"
                  name="starter"
                  value={recipe.key}
                  checked={ticked.includes(recipe.key)}
                  onChange={({ currentTarget: { checked } }) =>
                    setTicked(checked ? [...ticked, recipe.key] : ticked.filter((key) => key !== recipe.key))
                  }
                />
                <StarterWords recipe={recipe} line={recipe.forWhat} />
              </label>
            )}
          </li>
        ))}
      </ul>
      <div className="step-foot">
        <KeyLink href="/first-run?step=places" size={56}>
          Back
        </KeyLink>
        <Key type="submit" tone="go" size={56} isOff={form.isPending}>
          {count === 0
            ? taken.length > 0
              ? 'Go on'
              : 'Go on without a recipe'
            : `Take ${count === 1 ? '1 recipe' : `${count} recipes`} and go on`}
        </Key>
        <FormMessage state={form.state} />
      </div>
    </form>
  )
}

function StarterWords({ recipe: { name, coats }, line }: { recipe: StarterRecipe; line: string }) {
  return (
    <span className="starter-words">
      <b>{name}</b>
      <ShellSection
        coats={coats.map(({ kind, stucco }) => ({ grade: kind === 'seal' || stucco === 'none' ? ('seal' as const) : stucco }))}
        done={coats.length}
        open={null}
        state="dry"
        target={0.9}
        height={40}
        width={320}
        className="h-auto max-w-full"
        isDecoration
      />
      <span>
        {line} {coatWords(coats)}. <em>Its hours are {NOT_CALIBRATED}.</em>
      </span>
    </span>
  )
}

/** '6 coats: 2 face, 3 backup, the seal last'. */
function coatWords(coats: StarterRecipe['coats']): string {
  const count = (kind: string) => coats.filter((coat) => coat.kind === kind).length
  return `${coats.length} coats: ${count('face')} face, ${count('backup')} backup, the seal last`
}
