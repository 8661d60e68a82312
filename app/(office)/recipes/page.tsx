import type { Metadata } from 'next'
import Link from 'next/link'
import { DemoMark } from '@/app/_components/demo-mark'
import { KeyLink } from '@/app/_components/key'
import { EmptyState } from '@/app/(office)/_components/empty-state'
import { SmallRecipeSection } from '@/app/(office)/recipes/_components/recipe-section'
import { may } from '@/lib/members/roles'
import { loadRecipeList, type RecipeListRow } from '@/lib/queries/recipe-list'
import { calibrationInShort } from '@/lib/calibration/calibration-words'
import { coatsInShort } from '@/lib/recipes/coat-cells'
import { requireMemberPage } from '@/lib/server/auth'
import '@/app/(office)/recipes/recipes.css'

export const metadata: Metadata = { title: 'Recipes' }

export default async function RecipesPage() {
  const member = await requireMemberPage('see', '/recipes')
  const recipes = await loadRecipeList()
  const mayMake = may(member.role, 'recipes')
  const inUse = recipes.filter((recipe) => !recipe.isRetired)
  const retired = recipes.filter((recipe) => recipe.isRetired)

  if (recipes.length === 0) {
    return (
      <EmptyState
        title="No recipe yet"
        action={
          mayMake ? (
            <KeyLink href="/recipes/new" size={56} tone="go" icon="plus">
              Make the first recipe
            </KeyLink>
          ) : (
            <p>A supervisor makes recipes.</p>
          )
        }
      >
        A recipe is the list of coats that a tree gets: bath, stucco, and how long each of them needs to dry. Every tree stands on one.
      </EmptyState>
    )
  }

  return (
    <>
      <div className="page-head">
        <div className="min-w-0 grow">
          <h1>{inUse.length === 0 ? 'No recipe in use' : inUse.length === 1 ? '1 recipe in use' : `${inUse.length} recipes in use`}</h1>
          <p>The list of coats that a tree gets. A version never changes; a change is a new version.</p>
        </div>
        {mayMake && (
          <KeyLink href="/recipes/new" tone="go" icon="plus">
            Make a recipe
          </KeyLink>
        )}
      </div>
      {inUse.length > 0 && (
        <section className="plate" aria-label="Recipes in use">
          <RecipeRows recipes={inUse} />
        </section>
      )}
      {retired.length > 0 && (
        <details className="plate mt-5">
          <summary className="px-4">{retired.length} retired</summary>
          <RecipeRows recipes={retired} />
        </details>
      )}
    </>
  )
}

function RecipeRows({ recipes }: { recipes: readonly RecipeListRow[] }) {
  return (
    <ul className="recipe-rows">
      {recipes.map((recipe) => (
        <li key={recipe.id} className="link-row">
          <div className="recipe-row-name">
            {/* The link covers its whole row. */}
            <Link className="row-link" href={`/recipes/${recipe.id}`} prefetch={false}>
              {recipe.name}
            </Link>
            <span className="text-soot">
              {recipe.isDemo && <DemoMark />} version {recipe.version}, {calibrationInShort(recipe)}
            </span>
          </div>
          <div className="recipe-row-shell">
            <SmallRecipeSection coats={recipe.coats} fit={300} />
            <span className="text-soot">{coatsInShort(recipe.coats)}</span>
          </div>
          <p className="recipe-row-trees">
            {recipe.openTrees === 0 ? (
              <span className="text-soot">no open tree</span>
            ) : (
              <>
                <span className="num">{recipe.openTrees}</span> open {recipe.openTrees === 1 ? 'tree' : 'trees'}
              </>
            )}
          </p>
        </li>
      ))}
    </ul>
  )
}
