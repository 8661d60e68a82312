import type { Metadata } from 'next'
import { notFound } from 'next/navigation'
import { addVersionAction } from '@/app/(office)/recipes/actions'
import { RecipeForm } from '@/app/(office)/recipes/_components/recipe-form'
import { loadBathChoices, loadRecipeDetail } from '@/lib/queries/recipe-detail'
import { readVersion } from '@/lib/recipes/read-version'
import { requireMemberPage } from '@/lib/server/auth'
import '@/app/(office)/recipes/recipes.css'

export const metadata: Metadata = { title: 'New version' }

export default async function NewVersionPage({ params, searchParams }: PageProps<'/recipes/[recipeId]/new-version'>) {
  const { recipeId } = await params
  const path = `/recipes/${encodeURIComponent(recipeId)}`
  await requireMemberPage('recipes', `${path}/new-version`)
  const [recipe, baths, { from: asked }] = await Promise.all([loadRecipeDetail(recipeId), loadBathChoices(), searchParams])
  const newest = recipe?.versions[0]
  if (recipe === null || newest === undefined) notFound()
  const wanted = readVersion(asked)
  const from = wanted === null ? newest : recipe.versions.find(({ version }) => version === wanted)
  if (from === undefined) notFound()
  return (
    <>
      <div className="page-head">
        <div>
          <h1>
            Version {newest.version + 1} of {recipe.name}
          </h1>
          <p>Filled from version {from.version}. Trees stay on the version they stand on until somebody moves them.</p>
        </div>
      </div>
      <RecipeForm
        action={addVersionAction.bind(null, recipe.id)}
        baths={baths}
        coats={from.coats}
        versions={{ newest: plain(newest), from: plain(from) }}
        cancelPath={path}
      />
    </>
  )
}

/** What the form needs of a version; its trees would only travel along. */
const plain = ({ version, isCalibrated, coats }: NonNullable<Awaited<ReturnType<typeof loadRecipeDetail>>>['versions'][number]) => ({
  version,
  isCalibrated,
  coats,
})
