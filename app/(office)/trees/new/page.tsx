import type { Metadata } from 'next'
import { TreeForm } from '@/app/(office)/trees/_components/tree-form'
import { createTreeAction } from '@/app/(office)/trees/new/actions'
import { loadTreeForm } from '@/lib/queries/tree-form'
import { requireMemberPage } from '@/lib/server/auth'

export const metadata: Metadata = { title: 'Add a tree' }

/** The only choice is made already; a choice among several is a person's. */
const onlyOne = (ids: string[]) => (ids.length === 1 ? (ids[0] ?? '') : '')

export default async function NewTreePage() {
  await requireMemberPage('trees', '/trees/new')
  const choices = await loadTreeForm()
  const missing = [...(choices.recipes.length === 0 ? ['a recipe'] : []), ...(choices.places.length === 0 ? ['a place to hang it'] : [])]
  return (
    <>
      <div className="page-head">
        <div>
          <h1>Add a tree</h1>
          <p>Its intake comes next, on its own page. Coat 1 waits for both.</p>
        </div>
      </div>
      {missing.length > 0 ? (
        <section className="plate">
          <p className="plate-body text-18">A tree needs {missing.join(' and ')} first, and this foundry has none.</p>
        </section>
      ) : (
        <TreeForm
          action={createTreeAction}
          choices={choices}
          fixed={{}}
          submitWords="Add the tree"
          cancelPath="/trees"
          values={{
            tag: choices.nextTag,
            recipeVersionId: onlyOne(choices.recipes.map((recipe) => recipe.versionId)),
            placeId: onlyOne(choices.places.map((place) => place.id)),
            pieces: [],
            waxMassKg: '',
            cupKind: '',
            cupVolumeL: '',
            recessClass: '',
            spacing: '',
            hungMassKg: '',
            pourDate: '',
          }}
        />
      )}
    </>
  )
}
