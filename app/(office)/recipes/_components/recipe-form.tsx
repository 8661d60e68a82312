'use client'

import { useRef, useState } from 'react'
import { Field } from '@/app/_components/field'
import { Key, KeyLink } from '@/app/_components/key'
import { useUnits } from '@/app/_components/units-context'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { CoatFields, CoatFieldsHead } from '@/app/(office)/recipes/_components/coat-fields'
import { DifferenceMark } from '@/app/(office)/recipes/_components/difference-mark'
import { Differences } from '@/app/(office)/recipes/_components/differences'
import { RecipeSection } from '@/app/(office)/recipes/_components/recipe-section'
import { COAT_KINDS, STUCCOS } from '@/lib/coats/vocabulary'
import type { BathChoice } from '@/lib/queries/recipe-detail'
import type { StoredCoat } from '@/lib/queries/version-coats'
import { coatCells, coatsInShort, type CoatCells, type VersionCoat } from '@/lib/recipes/coat-cells'
import { cellsOfValues, coatValuesOf, nextCoatIndex, startingCoat, startingNeed, type CoatValues } from '@/lib/recipes/recipe-form-values'
import { referenceAirWords, startingNeedsWords } from '@/lib/recipes/need-words'
import { MOST_COATS } from '@/lib/recipes/recipe-input'
import { hasDifferences, sameNeeds, versionDifferences, type CoatDifference } from '@/lib/recipes/version-differences'
import type { FormState } from '@/lib/server/form-state'

type Version = { version: number; isCalibrated: boolean; coats: readonly StoredCoat[] }

export type RecipeFormProps = {
  action: (previous: FormState, form: FormData) => Promise<FormState>
  baths: readonly BathChoice[]
  /** Coats to begin with; a new recipe from nothing has none. */
  coats: readonly VersionCoat[]
  /** For a further version: the newest one, which it follows, and the one whose coats fill the form. */
  versions: { newest: Version; from: Version } | null
  cancelPath: string
}

type Row = { key: number; coat: CoatValues }

/** The form of a recipe or of a further version: its coats as rows, the shell they build, and what differs from the version before. */
export function RecipeForm({ action, baths, coats, versions, cancelPath }: RecipeFormProps) {
  const nextKey = useRef(MOST_COATS)
  const [rows, setRows] = useState<Row[]>(() => firstRows(coats, baths))
  // Complaints come by place in the list as it was sent; a row that moves takes its own along.
  const [sentKeys, setSentKeys] = useState<number[]>([])
  const form = useKeptForm(action)
  const { temp } = useUnits()
  const values = rows.map(({ coat }) => coat)
  const cells = values.map((coat) => cellsOfValues(coat, baths))
  const drawn = values.flatMap((coat) => {
    const kind = COAT_KINDS.find((known) => known === coat.kind)
    const stucco = STUCCOS.find((known) => known === coat.stucco)
    return kind === undefined || stucco === undefined ? [] : [{ kind, stucco }]
  })
  const differences = versions === null ? [] : versionDifferences(versions.newest.coats.map(coatCells), cells)
  const differenceOf = new Map(differences.flatMap((each) => ('number' in each ? [[each.number, each] as const] : [])))

  const change = (key: number, changes: Partial<CoatValues>) =>
    setRows((before) => before.map((row) => (row.key === key ? { key, coat: withChanges(row.coat, changes) } : row)))
  const move = (index: number, by: -1 | 1) =>
    setRows((before) => {
      const row = before[index]
      return row === undefined ? before : before.toSpliced(index, 1).toSpliced(index + by, 0, row)
    })
  const add = () =>
    setRows((before) => {
      const coatsBefore = before.map(({ coat }) => coat)
      const index = nextCoatIndex(coatsBefore)
      const kind = coatsBefore.slice(0, index).some((coat) => coat.kind === 'face') ? 'backup' : 'face'
      nextKey.current += 1
      return before.toSpliced(index, 0, { key: nextKey.current, coat: startingCoat(kind, coatsBefore, index, baths) })
    })

  return (
    <form
      {...form.formProps}
      className="recipe-form"
      onSubmit={(event) => {
        setSentKeys(rows.map(({ key }) => key))
        form.formProps.onSubmit(event)
      }}
    >
      {versions === null ? (
        <section className="plate">
          <div className="plate-body form-grid">
            <Field
              name="name"
              label="Name"
              maxLength={60}
              autoComplete="off"
              error={form.errorOf('name')}
              hint="As it is called on the floor: Eight coats, standard."
            />
            <Field
              name="note"
              label="Note"
              maxLength={300}
              autoComplete="off"
              error={form.errorOf('note')}
              hint="What it is for. It may stay empty."
            />
          </div>
        </section>
      ) : (
        <>
          <input type="hidden" name="from" value={versions.from.version} />
          <input type="hidden" name="follows" value={versions.newest.version} />
        </>
      )}

      <section className="plate">
        <header>
          <h2>{rows.length === 1 ? '1 coat' : `${rows.length} coats`}</h2>
          <p>{coatsInShort(drawn)}</p>
        </header>
        <div className="plate-body">
          <RecipeSection coats={drawn} />
        </div>
        <p className="need-hint">
          A need is the hours that a coat takes in the reference air ({referenceAirWords(temp)}) until only its target of water is left in
          it. Our starting values: {startingNeedsWords()}. Your first twenty to thirty coats calibrate them. Face coats, the last coat and
          trees with a recess wait for safe, whatever the guard says.
        </p>
        <div className="coat-rows">
          <CoatFieldsHead />
          {rows.map(({ key, coat }, index) => (
            <CoatFields
              key={key}
              index={index}
              count={rows.length}
              coat={coat}
              baths={baths}
              start={startingNeed(values, index)}
              mark={<RowMark difference={differenceOf.get(index + 1)} />}
              errorOf={(field) => (sentKeys.includes(key) ? form.errorOf(`coats.${sentKeys.indexOf(key)}.${field}`) : undefined)}
              onChange={(changes) => change(key, changes)}
              onMove={(by) => move(index, by)}
              onRemove={() => setRows((before) => before.filter((row) => row.key !== key))}
            />
          ))}
        </div>
        <div className="coat-rows-foot">
          {form.errorOf('coats') !== undefined && <p className="field-error">{form.errorOf('coats')}</p>}
          {rows.length < MOST_COATS ? (
            <Key icon="plus" onPress={add}>
              Add a coat
            </Key>
          ) : (
            <p className="text-soot">A recipe has at most {MOST_COATS} coats.</p>
          )}
        </div>
      </section>

      {versions !== null && (
        <section className="plate" aria-live="polite">
          <header>
            <h2>What differs from version {versions.newest.version}</h2>
            {versions.from.version !== versions.newest.version && (
              <p>
                the form was filled from version {versions.from.version}; version {versions.newest.version} is the newest
              </p>
            )}
          </header>
          <div className="plate-body grid gap-4">
            <Differences differences={differences} version={versions.newest.version} />
            {hasDifferences(differences) && <p>{calibrationWords(versions.from, cells)}</p>}
            <Field
              name="note"
              label="Why there is a new version"
              maxLength={300}
              autoComplete="off"
              error={form.errorOf('note')}
              hint="It stands with the version for ever."
            />
          </div>
        </section>
      )}

      <div className="form-foot">
        <Key type="submit" tone="go" isOff={form.isPending}>
          {versions === null ? 'Save the recipe' : `Save version ${versions.newest.version + 1}`}
        </Key>
        <KeyLink href={cancelPath} tone="quiet">
          Cancel
        </KeyLink>
        <FormMessage state={form.state} isLongForm />
      </div>
    </form>
  )
}

function RowMark({ difference }: { difference: CoatDifference | undefined }) {
  if (difference === undefined || difference.what === 'same' || difference.what === 'removed') return null
  return <DifferenceMark what={difference.what} />
}

function calibrationWords(from: Version, cells: readonly CoatCells[]): string {
  const kept = sameNeeds(from.coats.map(coatCells), cells)
  const areSame = kept.every((index) => index !== null)
  if (from.isCalibrated && areSame) return `No need changes: it stays calibrated, as version ${from.version} is.`
  const count = kept.filter((index) => index !== null && from.coats[index]?.calibratedByCoats != null).length
  if (count > 0) return `${count} of its coats ${count === 1 ? 'stays' : 'stay'} calibrated: their needs do not change.`
  return from.isCalibrated
    ? 'A need, or what a need rests on, changes: the new version will be not calibrated yet.'
    : 'It will be not calibrated yet, as the version before.'
}

/** A seal takes no stucco and everything else does: whoever changes the kind need not change that too. */
function withChanges(coat: CoatValues, changes: Partial<CoatValues>): CoatValues {
  const after = { ...coat, ...changes }
  if (changes.kind === 'seal') return { ...after, stucco: 'none' }
  return changes.kind !== undefined && after.stucco === 'none' ? { ...after, stucco: 'coarse' } : after
}

function firstRows(coats: readonly VersionCoat[], baths: readonly BathChoice[]): Row[] {
  if (coats.length > 0) return coats.map((coat, key) => ({ key, coat: coatValuesOf(coat) }))
  const face = startingCoat('face', [], 0, baths)
  return [
    { key: 0, coat: face },
    { key: 1, coat: startingCoat('seal', [face], 1, baths) },
  ]
}
