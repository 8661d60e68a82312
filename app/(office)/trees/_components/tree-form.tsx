'use client'

import { useId, useRef, useState, type ReactNode } from 'react'
import { Field, SelectField } from '@/app/_components/field'
import { Icon } from '@/app/_components/icons'
import { Key, KeyLink } from '@/app/_components/key'
import { useUnits } from '@/app/_components/units-context'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm, type KeptForm } from '@/app/(office)/_components/use-kept-form'
import { CROWDED_UNDER_MM, RECESS_CLASSES, SPACINGS, type RecessClass, type Spacing } from '@/lib/coats/vocabulary'
import { isSameName } from '@/lib/format/same-name'
import { formatLength, UNIT_SIGNS, type LengthUnit } from '@/lib/format/units'
import type { TreeForm as TreeChoices } from '@/lib/queries/tree-form'
import type { FormState } from '@/lib/server/form-state'
import type { FixedFields } from '@/lib/trees/fixed-fields'
import { openCast } from '@/lib/trees/open-cast'
import type { PieceValues, TreeFormValues } from '@/lib/trees/tree-form-values'
import { CUP_KINDS } from '@/lib/trees/tree-input'

const RECESS_WORDS: Record<RecessClass, string> = {
  none: 'None',
  'deep recess': 'Deep recess',
  'closed core': 'Closed core, with a duct',
  'closed core, no duct': 'Closed core, no duct',
}
const spacingWords = (unit: LengthUnit): Record<Spacing, string> => ({
  open: 'Open',
  crowded: `Crowded: a gap under ${formatLength(CROWDED_UNDER_MM, unit)}`,
})

const MOST_PIECES = 40
const NO_PIECE: PieceValues = { workTitle: '', sectionName: '', editionNumber: '1', isRecast: false }

export type TreeFormProps = {
  action: (previous: FormState, form: FormData) => Promise<FormState>
  values: TreeFormValues
  choices: TreeChoices
  fixed: FixedFields
  submitWords: string
  cancelPath: string
}

/** The form of a tree, new or known. Fields that stand say why; what was typed stays until it is saved. */
export function TreeForm({ action, values, choices, fixed, submitWords, cancelPath }: TreeFormProps) {
  const form = useKeptForm(action)
  const units = useUnits()
  const spacings = spacingWords(units.length)
  const recipe = choices.recipes.find((candidate) => candidate.versionId === values.recipeVersionId)
  return (
    <form {...form.formProps} className="tree-form">
      <section className="plate">
        <header>
          <h2>The tree</h2>
        </header>
        <div className="plate-body form-grid">
          {fixed.tag === undefined ? (
            <Field
              name="tag"
              label="Tag"
              defaultValue={values.tag}
              error={form.errorOf('tag')}
              hint="The next free one. A tag is for one tree, for ever."
              autoComplete="off"
              autoCapitalize="characters"
              spellCheck={false}
              maxLength={9}
            />
          ) : (
            <FixedField label="Tag" value={values.tag} why={fixed.tag} />
          )}
          {fixed.recipeVersionId === undefined ? (
            <SelectField
              name="recipeVersionId"
              label="Recipe"
              defaultValue={values.recipeVersionId}
              error={form.errorOf('recipeVersionId')}
            >
              <option value="" disabled>
                Choose a recipe
              </option>
              {choices.recipes.map((choice) => (
                <option key={choice.versionId} value={choice.versionId}>
                  {choice.label}, {choice.coatCount} coats{choice.isCalibrated ? '' : ', not calibrated yet'}
                </option>
              ))}
            </SelectField>
          ) : (
            <FixedField label="Recipe" value={recipe?.label ?? ''} why={fixed.recipeVersionId} />
          )}
          {fixed.placeId === undefined ? (
            <SelectField name="placeId" label="Where it hangs" defaultValue={values.placeId} error={form.errorOf('placeId')}>
              <option value="" disabled>
                Choose a place
              </option>
              {choices.places.map((place) => (
                <option key={place.id} value={place.id}>
                  {place.name}
                </option>
              ))}
            </SelectField>
          ) : (
            <FixedField
              label="Where it hangs"
              value={choices.places.find((place) => place.id === values.placeId)?.name ?? 'A place no longer used'}
              why={fixed.placeId}
            />
          )}
          <Field
            name="pourDate"
            type="date"
            label="Pour date"
            defaultValue={values.pourDate}
            error={form.errorOf('pourDate')}
            hint="Leave it empty while none is set."
          />
        </div>
      </section>

      {fixed.pieces === undefined ? (
        <Pieces pieces={values.pieces} choices={choices} form={form} />
      ) : (
        <section className="plate">
          <header>
            <h2>Pieces</h2>
            <p>{fixed.pieces}</p>
          </header>
          <ul className="plate-body grid gap-2">
            {values.pieces.map((piece, index) => (
              // eslint-disable-next-line react/no-array-index-key -- a fixed list that only ever shows
              <li key={index}>
                {piece.workTitle}
                {piece.sectionName === '' ? '' : `, ${piece.sectionName}`}, edition {piece.editionNumber}
                {piece.isRecast ? ', recast' : ''}
              </li>
            ))}
          </ul>
        </section>
      )}

      <section className="plate">
        <header>
          <h2>Wax and cup</h2>
          <p>the slowest spot of a tree decides when it is dry</p>
        </header>
        <div className="plate-body form-grid">
          <Field
            name="waxMassKg"
            label="Wax mass"
            unit={UNIT_SIGNS[units.mass]}
            inputMode="decimal"
            defaultValue={values.waxMassKg}
            error={form.errorOf('waxMassKg')}
            hint="Wax alone, without cup and pins."
            autoComplete="off"
          />
          <Field
            name="hungMassKg"
            label="Weight as hung"
            unit={UNIT_SIGNS[units.mass]}
            inputMode="decimal"
            defaultValue={values.hungMassKg}
            error={form.errorOf('hungMassKg')}
            hint="Only if weighed."
            autoComplete="off"
          />
          <SelectField name="cupKind" label="Cup" defaultValue={values.cupKind} error={form.errorOf('cupKind')}>
            <option value="" disabled>
              Choose the cup
            </option>
            {CUP_KINDS.map((kind) => (
              <option key={kind} value={kind}>
                {kind.charAt(0).toUpperCase() + kind.slice(1)}
              </option>
            ))}
          </SelectField>
          <Field
            name="cupVolumeL"
            label="Cup volume"
            unit="L"
            inputMode="decimal"
            defaultValue={values.cupVolumeL}
            error={form.errorOf('cupVolumeL')}
            hint="It fills with metal, whatever it is made of."
            autoComplete="off"
          />
          {fixed.recessClass === undefined ? (
            <SelectField
              name="recessClass"
              label="Deepest recess"
              defaultValue={values.recessClass}
              error={form.errorOf('recessClass')}
              hint="An outside that looks dry proves nothing about a core."
            >
              <option value="" disabled>
                Choose the deepest recess
              </option>
              {RECESS_CLASSES.map((recess) => (
                <option key={recess} value={recess}>
                  {RECESS_WORDS[recess]}
                </option>
              ))}
            </SelectField>
          ) : (
            <FixedField label="Deepest recess" value={words(RECESS_WORDS, values.recessClass)} why={fixed.recessClass} />
          )}
          {fixed.spacing === undefined ? (
            <SelectField name="spacing" label="Spacing on the tree" defaultValue={values.spacing} error={form.errorOf('spacing')}>
              <option value="" disabled>
                Choose the spacing
              </option>
              {SPACINGS.map((spacing) => (
                <option key={spacing} value={spacing}>
                  {spacings[spacing]}
                </option>
              ))}
            </SelectField>
          ) : (
            <FixedField label="Spacing on the tree" value={words(spacings, values.spacing)} why={fixed.spacing} />
          )}
        </div>
      </section>

      <div className="form-foot">
        <Key type="submit" tone="go" size={56} isOff={form.isPending}>
          {submitWords}
        </Key>
        <KeyLink href={cancelPath} size={56} tone="quiet">
          Cancel
        </KeyLink>
        <FormMessage state={form.state} isLongForm />
      </div>
    </form>
  )
}

function words<Value extends string>(table: Record<Value, string>, value: string): string {
  return Object.entries<string>(table).find(([key]) => key === value)?.[1] ?? value
}

function FixedField({ label, value, why }: { label: string; value: ReactNode; why: string }) {
  return (
    <div className="field">
      <span className="label">{label}</span>
      <p className="fixed-value">{value}</p>
      <p className="field-hint">{why}</p>
    </div>
  )
}

function Pieces({ pieces, choices, form }: { pieces: PieceValues[]; choices: TreeChoices; form: KeptForm }) {
  const nextKey = useRef(pieces.length)
  const [rows, setRows] = useState(() => (pieces.length === 0 ? [NO_PIECE] : pieces).map((piece, key) => ({ key, piece })))
  const worksId = useId()
  const add = () => {
    // Most second pieces are of the same work: the one above is the best guess.
    const above = form.formProps.ref.current?.elements.namedItem(`pieces.${rows.length - 1}.workTitle`)
    const workTitle = above instanceof HTMLInputElement ? above.value : ''
    nextKey.current += 1
    setRows([...rows, { key: nextKey.current, piece: { ...NO_PIECE, workTitle } }])
  }
  return (
    <section className="plate">
      <header>
        <h2>Pieces</h2>
        <p>a work, a part of it, and which casting of the edition</p>
      </header>
      <div className="plate-body grid gap-4">
        <datalist id={worksId}>
          {choices.works.map((work) => (
            <option key={work.title} value={work.title}>
              {work.title}
            </option>
          ))}
        </datalist>
        {rows.map(({ key, piece }, index) => (
          <PieceRow
            key={key}
            index={index}
            piece={piece}
            choices={choices}
            worksId={worksId}
            errorOf={form.errorOf}
            onRemove={rows.length === 1 ? null : () => setRows(rows.filter((row) => row.key !== key))}
          />
        ))}
        {form.errorOf('pieces') !== undefined && <p className="field-error">{form.errorOf('pieces')}</p>}
        {rows.length < MOST_PIECES && (
          <span>
            <Key icon="plus" tone="quiet" onPress={add}>
              Another piece
            </Key>
          </span>
        )}
      </div>
    </section>
  )
}

function PieceRow({
  index,
  piece,
  choices,
  worksId,
  errorOf,
  onRemove,
}: {
  index: number
  piece: PieceValues
  choices: TreeChoices
  worksId: string
  errorOf: KeptForm['errorOf']
  onRemove: (() => void) | null
}) {
  const [typed, setTyped] = useState(piece)
  const sectionsId = useId()
  const note = (changes: Partial<PieceValues>) => setTyped((before) => ({ ...before, ...changes }))
  const work = choices.works.find(({ title }) => isSameName(title, typed.workTitle))
  const sections = work?.sections ?? []
  const stillOpen = openCast(typed, choices.openCasts)
  const name = (field: keyof PieceValues) => `pieces.${index}.${field}`
  return (
    <fieldset className="piece-row">
      <legend className="vh">Piece {index + 1}</legend>
      <Field
        name={name('workTitle')}
        label="Work"
        defaultValue={piece.workTitle}
        onInput={(event) => note({ workTitle: event.currentTarget.value })}
        list={worksId}
        maxLength={80}
        autoComplete="off"
        error={errorOf(name('workTitle'))}
      />
      <Field
        name={name('sectionName')}
        label="Section"
        defaultValue={piece.sectionName}
        onInput={(event) => note({ sectionName: event.currentTarget.value })}
        list={sectionsId}
        maxLength={60}
        autoComplete="off"
        placeholder="cast in one"
        error={errorOf(name('sectionName'))}
      />
      <datalist id={sectionsId}>
        {sections.filter(Boolean).map((section) => (
          <option key={section} value={section}>
            {section}
          </option>
        ))}
      </datalist>
      <Field
        name={name('editionNumber')}
        label="Edition"
        inputMode="numeric"
        defaultValue={piece.editionNumber}
        onInput={(event) => note({ editionNumber: event.currentTarget.value })}
        hint={work?.editionSize == null ? undefined : `of ${work.editionSize}`}
        maxLength={4}
        autoComplete="off"
        error={errorOf(name('editionNumber'))}
      />
      <label className="tick">
        <input
          type="checkbox"
          name={name('isRecast')}
          defaultChecked={piece.isRecast}
          onChange={(event) => note({ isRecast: event.currentTarget.checked })}
        />
        <span>Recast</span>
      </label>
      {onRemove !== null && (
        <Key tone="quiet" icon="minus" aria-label={`Take piece ${index + 1} off the form`} onPress={onRemove}>
          Remove
        </Key>
      )}
      <p role="status" className="piece-note">
        {typed.isRecast && stillOpen !== null && (
          <span className="flex gap-2 text-ochre-ink">
            <Icon name="warning" />
            <span>
              Edition {typed.editionNumber.trim()} still hangs on {stillOpen}, which is open: cast it again only if that shell is given up.
            </span>
          </span>
        )}
      </p>
    </fieldset>
  )
}
