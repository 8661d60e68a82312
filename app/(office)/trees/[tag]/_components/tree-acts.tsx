'use client'

import { useEffect, useRef, useState } from 'react'
import { Field, SelectField } from '@/app/_components/field'
import { Icon } from '@/app/_components/icons'
import { Key, KeyLink } from '@/app/_components/key'
import { RecipeMoveForm } from '@/app/(office)/trees/[tag]/_components/recipe-move-form'
import { holdAction, liftHoldAction, moveAction, scrapAction } from '@/app/(office)/trees/[tag]/actions'
import { ReasonForm } from '@/app/(office)/_components/reason-form'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { MOVED_MINUTES_AGO } from '@/lib/trees/move-form'
import type { NewerVersion } from '@/lib/queries/newer-versions'

export type TreeActsProps = {
  treeId: string
  tag: string
  isHeld: boolean
  /** What this member may do to this tree as it hangs. */
  may: { hold: boolean; lift: boolean; move: boolean; correct: boolean; edit: boolean; scrap: boolean; release: boolean; dip: boolean }
  nextDip: { number: number; isDue: boolean } | null
  places: { id: string; name: string }[]
  placeId: string
  /** Of its recipe, newest first; empty where it may not be moved. */
  newerVersions: readonly NewerVersion[]
  coatsOn: number
}

type Panel = 'hold' | 'lift' | 'move' | 'recipe' | 'scrap'

/** The keys of a tree, and the little form that each of them opens under the head. */
export function TreeActs({ treeId, tag, isHeld, may, nextDip, places, placeId, newerVersions, coatsOn }: TreeActsProps) {
  const [panel, setPanel] = useState<Panel | null>(null)
  // With the hold as it is after the act: words of a hold that was lifted since are not true any more.
  const [said, setSaid] = useState<{ words: string; isHeld: boolean } | null>(null)
  const path = `/trees/${encodeURIComponent(tag)}`
  const toggle = (next: Panel) => () => {
    setSaid(null)
    setPanel(panel === next ? null : next)
  }
  const done =
    (words: string, isHeldAfter = isHeld) =>
    () => {
      setPanel(null)
      setSaid({ words, isHeld: isHeldAfter })
    }
  return (
    <>
      <div className="tree-acts">
        {may.hold && !isHeld && (
          <Key icon="hold" aria-expanded={panel === 'hold'} onPress={toggle('hold')}>
            Hold
          </Key>
        )}
        {may.lift && isHeld && (
          <Key icon="hold" aria-expanded={panel === 'lift'} onPress={toggle('lift')}>
            Lift hold
          </Key>
        )}
        {may.release && (
          <KeyLink href={`/burnout#${tag}`} tone="go">
            Release
          </KeyLink>
        )}
        {may.dip && nextDip !== null && (
          <KeyLink href={`/floor?tree=${treeId}`} tone={nextDip.isDue ? 'go' : 'plain'} className="grow-phone">
            Log dip {nextDip.number}
          </KeyLink>
        )}
      </div>
      {(may.move || may.edit || may.scrap || newerVersions.length > 0) && (
        <div className="tree-acts-more">
          {may.move && (
            <Key tone="quiet" aria-expanded={panel === 'move'} onPress={toggle('move')}>
              Move
            </Key>
          )}
          {may.edit && (
            <KeyLink tone="quiet" href={`${path}/edit`}>
              Edit
            </KeyLink>
          )}
          {newerVersions.length > 0 && (
            <Key tone="quiet" aria-expanded={panel === 'recipe'} onPress={toggle('recipe')}>
              Newer recipe
            </Key>
          )}
          {may.scrap && (
            <Key tone="quiet" aria-expanded={panel === 'scrap'} onPress={toggle('scrap')}>
              Scrap
            </Key>
          )}
        </div>
      )}
      <p role="status" className="tree-acts-said">
        {said?.isHeld === isHeld && (
          <span className="form-done">
            <Icon name="check" />
            <span>{said.words}</span>
          </span>
        )}
      </p>
      {panel !== null && (
        <section className="plate tree-panel" aria-label={PANEL_TITLES[panel]}>
          <div className="plate-body">
            {panel === 'hold' && (
              <ReasonForm
                isOpenedByKey
                action={holdAction.bind(null, treeId)}
                label={`Why ${tag} is held, and what to do`}
                hint="Everybody sees it on the floor: ‘Crack at the cup. Patch, then ask Ines.’"
                confirm={`Hold ${tag}`}
                onDone={done(`${tag} is held.`, true)}
              />
            )}
            {panel === 'lift' && (
              <ReasonForm
                isOpenedByKey
                action={liftHoldAction.bind(null, treeId)}
                label="Why the hold is lifted"
                confirm="Lift the hold"
                onDone={done('The hold is lifted.', false)}
              />
            )}
            {panel === 'move' && (
              <MoveForm treeId={treeId} places={places} placeId={placeId} mayCorrect={may.correct} onDone={done('Moved.')} />
            )}
            {panel === 'recipe' && (
              <RecipeMoveForm treeId={treeId} versions={newerVersions} coatsOn={coatsOn} onDone={done('Moved to the newer version.')} />
            )}
            {panel === 'scrap' && (
              <ReasonForm
                isOpenedByKey
                isHeldKey
                action={scrapAction.bind(null, treeId)}
                label={`Why ${tag} is scrapped`}
                hint="It leaves the floor for good. Its log stays to be read; its tag is not used again."
                confirm={`Hold to scrap ${tag}`}
                onDone={done(`${tag} is scrapped.`)}
              />
            )}
          </div>
        </section>
      )}
    </>
  )
}

const PANEL_TITLES: Record<Panel, string> = {
  hold: 'Hold',
  lift: 'Lift the hold',
  move: 'Move',
  recipe: 'Move to a newer version of the recipe',
  scrap: 'Scrap',
}

function MoveForm({
  treeId,
  places,
  placeId,
  mayCorrect,
  onDone,
}: {
  treeId: string
  places: { id: string; name: string }[]
  placeId: string
  mayCorrect: boolean
  onDone: () => void
}) {
  const form = useKeptForm(moveAction.bind(null, treeId), onDone)
  const box = useRef<HTMLDivElement>(null)
  useEffect(() => {
    box.current?.scrollIntoView({ block: 'center' })
    box.current?.querySelector('select')?.focus({ preventScroll: true })
  }, [])
  return (
    <div ref={box}>
      <form {...form.formProps} className="reason-form">
        <SelectField
          name="placeId"
          label="Where it hangs"
          defaultValue=""
          error={form.errorOf('placeId')}
          hint="The drying clock counts the air of that place since then. An earlier move that was wrong is put right with it."
        >
          <option value="" disabled>
            Choose a place
          </option>
          {places.map((place) => (
            <option key={place.id} value={place.id}>
              {place.id === placeId ? `${place.name}, as the log has it` : place.name}
            </option>
          ))}
        </SelectField>
        <SelectField
          name="minutesAgo"
          label="Since when"
          defaultValue="0"
          error={form.errorOf('minutesAgo') ?? (mayCorrect ? undefined : form.errorOf('movedAt'))}
        >
          {MOVED_MINUTES_AGO.map((minutes) => (
            <option key={minutes} value={minutes}>
              {minutes === 0 ? 'Just now' : `About ${minutes} min ago`}
            </option>
          ))}
        </SelectField>
        {mayCorrect && (
          <Field
            name="movedAt"
            label="Or at"
            type="datetime-local"
            hint="Any time after the newest dip. Empty: as chosen before."
            error={form.errorOf('movedAt')}
          />
        )}
        <Key type="submit" tone="ink" isOff={form.isPending}>
          Move it
        </Key>
      </form>
      <FormMessage state={form.state} />
    </div>
  )
}
