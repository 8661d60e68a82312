'use client'

import { useEffect, useRef, useState } from 'react'
import { Field } from '@/app/_components/field'
import { Key, KeyLink } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { renameRecipeAction, retireRecipeAction } from '@/app/(office)/recipes/actions'

export type RecipeActsProps = { recipeId: string; name: string; isRetired: boolean; version: number; isNewest: boolean }

/** What a supervisor may do with a recipe. */
export function RecipeActs({ recipeId, name, isRetired, version, isNewest }: RecipeActsProps) {
  const [isRenaming, setIsRenaming] = useState(false)
  const retire = useKeptForm(retireRecipeAction.bind(null, recipeId, !isRetired))
  const path = `/recipes/${recipeId}/new-version`
  return (
    <div className="recipe-acts">
      <div className="recipe-keys">
        <KeyLink href={isNewest ? path : `${path}?from=${version}`} tone="go" icon="plus">
          {isNewest ? 'New version' : `New version from version ${version}`}
        </KeyLink>
        <Key aria-expanded={isRenaming} onPress={() => setIsRenaming(!isRenaming)}>
          Rename
        </Key>
        <form {...retire.formProps}>
          <Key type="submit" isOff={retire.isPending}>
            {isRetired ? 'Take into use' : 'Retire'}
          </Key>
        </form>
        <KeyLink href={`/recipes/new?from=${recipeId}`} tone="quiet">
          New recipe from this one
        </KeyLink>
      </div>
      <FormMessage state={retire.state} />
      {isRenaming && <RenameForm recipeId={recipeId} name={name} onDone={() => setIsRenaming(false)} />}
    </div>
  )
}

function RenameForm({ recipeId, name, onDone }: { recipeId: string; name: string; onDone: () => void }) {
  const form = useKeptForm(renameRecipeAction.bind(null, recipeId), onDone)
  const box = useRef<HTMLDivElement>(null)
  useEffect(() => box.current?.querySelector('input')?.focus(), [])
  return (
    <div ref={box}>
      <form {...form.formProps} className="reason-form">
        <Field name="name" label="Name" defaultValue={name} maxLength={60} autoComplete="off" error={form.errorOf('name')} />
        <Key type="submit" tone="ink" isOff={form.isPending}>
          Rename it
        </Key>
      </form>
      <FormMessage state={form.state} />
    </div>
  )
}
