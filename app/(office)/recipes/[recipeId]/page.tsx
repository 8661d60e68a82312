import type { Metadata } from 'next'
import Link from 'next/link'
import { notFound } from 'next/navigation'
import { DemoMark } from '@/app/_components/demo-mark'
import { Icon } from '@/app/_components/icons'
import { fittedTagHeight, Tag } from '@/app/_components/tag'
import { CoatTable } from '@/app/(office)/recipes/_components/coat-table'
import { Differences } from '@/app/(office)/recipes/_components/differences'
import { RecipeSection } from '@/app/(office)/recipes/_components/recipe-section'
import { MoveTrees } from '@/app/(office)/recipes/[recipeId]/_components/move-trees'
import { RecipeActs } from '@/app/(office)/recipes/[recipeId]/_components/recipe-acts'
import { formatDateOfYear } from '@/lib/format/local-time'
import { referenceAirWords } from '@/lib/recipes/need-words'
import { may } from '@/lib/members/roles'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { loadRecipeDetail, type RecipeVersionRow } from '@/lib/queries/recipe-detail'
import { calibrationInShort } from '@/lib/calibration/calibration-words'
import { coatCells, coatsInShort } from '@/lib/recipes/coat-cells'
import { moveRefusal } from '@/lib/recipes/move-rules'
import { readVersion } from '@/lib/recipes/read-version'
import { differencesInShort, versionDifferences, type CoatDifference } from '@/lib/recipes/version-differences'
import { requireMemberPage } from '@/lib/server/auth'
import '@/app/(office)/recipes/recipes.css'

export const metadata: Metadata = { title: 'Recipe' }

/** Tags that stand in a line of the list of versions; the others are folded. */
const TAGS_SHOWN = 24

export default async function RecipePage({ params, searchParams }: PageProps<'/recipes/[recipeId]'>) {
  const { recipeId } = await params
  const path = `/recipes/${encodeURIComponent(recipeId)}`
  const member = await requireMemberPage('see', path)
  const [recipe, { timeZone }, { version: asked }] = await Promise.all([loadRecipeDetail(recipeId), loadFoundry(), searchParams])
  const newest = recipe?.versions[0]
  if (recipe === null || newest === undefined) notFound()
  const wanted = readVersion(asked)
  const shown = asked === undefined ? newest : recipe.versions.find(({ version }) => version === wanted)
  if (shown === undefined) notFound()
  const before = versionBefore(recipe.versions, shown)
  const differences = differencesOf(recipe.versions, shown)
  const mayWrite = may(member.role, 'recipes')
  const onOlder = recipe.versions.filter((version) => version !== newest).flatMap((version) => version.openTrees)
  const address = (version: RecipeVersionRow) => (version === newest ? path : `${path}?version=${version.version}`)

  return (
    <article className="recipe-page">
      <div className="page-head">
        <div className="min-w-0 grow">
          <h1 className="[overflow-wrap:anywhere]">
            {recipe.name} {recipe.isDemo && <DemoMark />}
          </h1>
          <p>
            Version {shown.version}
            {shown === newest ? ', the newest' : ` of ${newest.version}`} · {calibrationInShort(shown)} · made{' '}
            {formatDateOfYear(shown.at, timeZone)}
            {shown.by !== null && ` by ${shown.by}`}
          </p>
        </div>
        {mayWrite && (
          <RecipeActs
            recipeId={recipe.id}
            name={recipe.name}
            isRetired={recipe.isRetired}
            version={shown.version}
            isNewest={shown === newest}
          />
        )}
      </div>
      {recipe.isRetired && (
        <p className="recipe-retired">
          <Icon name="hold" /> Retired: new trees are not offered this recipe. Trees that stand on it go on.
        </p>
      )}
      {recipe.versions.length > 1 && (
        <nav className="begin-with" aria-label="Versions">
          {recipe.versions.map((version) => (
            <Link
              key={version.id}
              className="group-link"
              href={address(version)}
              prefetch={false}
              aria-current={version === shown ? 'page' : undefined}
            >
              {version === shown && <Icon name="check" />}
              Version {version.version}
            </Link>
          ))}
        </nav>
      )}

      <section className="plate">
        <header>
          <h2>{shown.coats.length === 1 ? '1 coat' : `${shown.coats.length} coats`}</h2>
          <p>{coatsInShort(shown.coats)}</p>
        </header>
        <div className="plate-body grid gap-3">
          {shown.note !== '' && <p className="recipe-note">{shown.note}</p>}
          <RecipeSection coats={shown.coats} />
        </div>
        <CoatTable coats={shown.coats} isCalibrated={shown.isCalibrated} differences={differences} />
        <p className="need-hint">
          Needs are hours in the reference air: {referenceAirWords(member.units.temp)}.{' '}
          {!shown.isCalibrated &&
            'Where a need is not calibrated yet, it is our starting value: your first twenty to thirty coats show what it is here. '}
          {may(member.role, 'calibrate') && (
            <>
              <Link className="underline underline-offset-4" href="/calibration" prefetch={false}>
                Calibration
              </Link>{' '}
              shows what finished coats say.{' '}
            </>
          )}
          Face coats, the last coat and trees with a recess wait for safe, whatever the guard says.
        </p>
      </section>

      {before !== null && (
        <section className="plate mt-5">
          <header>
            <h2>What differs from version {before.version}</h2>
            <p>{differencesInShort(differences)}</p>
          </header>
          <div className="plate-body">
            <Differences differences={differences} version={before.version} />
          </div>
        </section>
      )}

      <section className="plate mt-5">
        <header>
          <h2>Versions and the trees on them</h2>
          <p>a version never changes; trees stay on theirs until somebody moves them</p>
        </header>
        <ul className="version-rows">
          {recipe.versions.map((version) => (
            <li key={version.id}>
              <div>
                <Link className="font-semibold underline underline-offset-4" href={address(version)} prefetch={false}>
                  Version {version.version}
                </Link>
                <span className="text-soot">
                  {' '}
                  {formatDateOfYear(version.at, timeZone)}
                  {version.by !== null && ` by ${version.by}`}, {calibrationInShort(version)}
                </span>
                <p className="[overflow-wrap:anywhere]">{version.note === '' ? 'No note.' : version.note}</p>
                {version.version > 1 && (
                  <p className="text-soot">
                    Against version {version.version - 1}: {differencesInShort(differencesOf(recipe.versions, version))}.
                  </p>
                )}
              </div>
              <VersionTrees version={version} />
            </li>
          ))}
        </ul>
      </section>

      {mayWrite && recipe.versions.length > 1 && (
        <section className="plate mt-5">
          <header>
            <h2>Move trees to version {newest.version}</h2>
            <p>coats that are on stay as they are; version {newest.version} applies to those not on yet</p>
          </header>
          <div className="plate-body">
            <MoveTrees
              versionId={newest.id}
              version={newest.version}
              trees={onOlder.map((tree) => ({
                id: tree.id,
                tag: tree.tag,
                isHeld: tree.isHeld,
                version: tree.version,
                coatsOn: tree.coatsOn,
                refusal: moveRefusal(tree, { recipeId: recipe.id, version: newest.version, coatCount: newest.coats.length }),
              }))}
            />
          </div>
        </section>
      )}
    </article>
  )
}

function VersionTrees({ version: { openTrees, leftTrees } }: { version: RecipeVersionRow }) {
  return (
    <div className="version-trees">
      {openTrees.length === 0 ? (
        <p className="text-soot">No open tree stands on it.</p>
      ) : (
        <p>{openTrees.length === 1 ? '1 open tree' : `${openTrees.length} open trees`}</p>
      )}
      <TagLine trees={openTrees.slice(0, TAGS_SHOWN)} />
      {openTrees.length > TAGS_SHOWN && (
        <details>
          <summary>{openTrees.length - TAGS_SHOWN} more</summary>
          <TagLine trees={openTrees.slice(TAGS_SHOWN)} />
        </details>
      )}
      {leftTrees > 0 && <p className="text-soot">{leftTrees === 1 ? '1 tree has left on it.' : `${leftTrees} trees have left on it.`}</p>}
    </div>
  )
}

function TagLine({ trees }: { trees: RecipeVersionRow['openTrees'] }) {
  return (
    <span className="tag-line">
      {trees.map(({ id, tag, isHeld }) => (
        <Tag key={id} tag={tag} height={fittedTagHeight(tag, 32)} isHeld={isHeld} isLink />
      ))}
    </span>
  )
}

const versionBefore = (versions: readonly RecipeVersionRow[], { version }: RecipeVersionRow): RecipeVersionRow | null =>
  versions.find((each) => each.version === version - 1) ?? null

function differencesOf(versions: readonly RecipeVersionRow[], version: RecipeVersionRow): CoatDifference[] {
  const before = versionBefore(versions, version)
  return before === null ? [] : versionDifferences(before.coats.map(coatCells), version.coats.map(coatCells))
}
