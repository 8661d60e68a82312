import type { Metadata } from 'next'
import { notFound } from 'next/navigation'
import { KeyLink } from '@/app/_components/key'
import { Tag } from '@/app/_components/tag'
import { TreeForm } from '@/app/(office)/trees/_components/tree-form'
import { editTreeAction } from '@/app/(office)/trees/[tag]/edit/actions'
import { systemClock } from '@/lib/core/clock'
import { loadTreeDetail } from '@/lib/queries/tree-detail'
import { loadTreeForm } from '@/lib/queries/tree-form'
import { requireMemberPage } from '@/lib/server/auth'
import { fixedFields } from '@/lib/trees/fixed-fields'
import { readTag } from '@/lib/trees/read-tag'
import { formValuesOf } from '@/lib/trees/tree-form-values'

export async function generateMetadata({ params }: PageProps<'/trees/[tag]/edit'>): Promise<Metadata> {
  return { title: `Edit ${readTag((await params).tag) ?? 'tree'}` }
}

export default async function EditTreePage({ params }: PageProps<'/trees/[tag]/edit'>) {
  const tag = readTag((await params).tag)
  if (tag === null) notFound()
  const path = `/trees/${encodeURIComponent(tag)}`
  const member = await requireMemberPage('trees', `${path}/edit`)
  const [detail, choices] = await Promise.all([loadTreeDetail({ tag, viewer: member, clock: systemClock }), loadTreeForm()])
  if (detail === null) notFound()
  const { state, title, coatsOn, coats } = detail.tree
  // A tree keeps the version it was treed with, also when a newer one is out.
  const { versionId, name, version, isCalibrated } = detail.recipe
  const recipes = choices.recipes.some((recipe) => recipe.versionId === versionId)
    ? choices.recipes
    : [{ versionId, label: `${name}, version ${version}`, coatCount: coats.length, isCalibrated }, ...choices.recipes]
  return (
    <>
      <div className="page-head items-center">
        <Tag tag={tag} size="l" isHeld={state === 'held'} ground="bone" />
        <div>
          <h1>Edit the tree</h1>
          <p>{title}</p>
        </div>
      </div>
      {state === 'released' || state === 'scrapped' ? (
        <section className="plate">
          <div className="plate-body flex flex-wrap items-center gap-4">
            <p className="text-18">{tag} has left the floor: its records stand as they are.</p>
            <KeyLink href={path}>Back to {tag}</KeyLink>
          </div>
        </section>
      ) : (
        <TreeForm
          action={editTreeAction.bind(null, tag)}
          choices={{ ...choices, recipes }}
          values={formValuesOf(detail, member.units.mass)}
          fixed={fixedFields(coatsOn)}
          submitWords="Save"
          cancelPath={path}
        />
      )}
    </>
  )
}
