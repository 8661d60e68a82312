import type { Metadata } from 'next'
import Link from 'next/link'
import { Icon } from '@/app/_components/icons'
import { KeyLink } from '@/app/_components/key'
import { EmptyState } from '@/app/(office)/_components/empty-state'
import { createRecipeAction } from '@/app/(office)/recipes/actions'
import { RecipeForm } from '@/app/(office)/recipes/_components/recipe-form'
import { loadBathChoices } from '@/lib/queries/recipe-detail'
import { loadRecipeList } from '@/lib/queries/recipe-list'
import { requireMemberPage } from '@/lib/server/auth'
import '@/app/(office)/recipes/recipes.css'

export const metadata: Metadata = { title: 'Make a recipe' }

export default async function NewRecipePage({ searchParams }: PageProps<'/recipes/new'>) {
  await requireMemberPage('recipes', '/recipes/new')
  const { from } = await searchParams
  const [baths, recipes] = await Promise.all([loadBathChoices(), loadRecipeList()])
  const chosen = recipes.find((recipe) => recipe.id === from) ?? null
  const inUse = recipes.filter((recipe) => !recipe.isRetired || recipe === chosen)
  if (baths.every((bath) => bath.isRetired)) {
    return (
      <EmptyState
        title="No bath yet"
        action={
          <KeyLink href="/settings/baths" size={56} tone="go">
            To the baths
          </KeyLink>
        }
      >
        Every coat of a recipe names the bath that it comes from, and this foundry has none in use.
      </EmptyState>
    )
  }
  return (
    <>
      <div className="page-head">
        <div>
          <h1>Make a recipe</h1>
          <p>It gets its version 1, not calibrated yet: our starting values stand until your own coats have shown better ones.</p>
        </div>
      </div>
      {inUse.length > 0 && (
        <nav className="begin-with" aria-label="Begin with the coats of">
          <span className="label">Begin with</span>
          <BeginLink href="/recipes/new" word="Nothing" isCurrent={chosen === null} />
          {inUse.map((recipe) => (
            <BeginLink key={recipe.id} href={`/recipes/new?from=${recipe.id}`} word={recipe.name} isCurrent={chosen === recipe} />
          ))}
        </nav>
      )}
      <RecipeForm
        key={chosen?.id ?? ''}
        action={createRecipeAction}
        baths={baths}
        coats={chosen?.coats ?? []}
        versions={null}
        cancelPath="/recipes"
      />
    </>
  )
}

function BeginLink({ href, word, isCurrent }: { href: string; word: string; isCurrent: boolean }) {
  return (
    <Link className="group-link" href={href} prefetch={false} aria-current={isCurrent ? 'page' : undefined}>
      {isCurrent && <Icon name="check" />}
      {word}
    </Link>
  )
}
