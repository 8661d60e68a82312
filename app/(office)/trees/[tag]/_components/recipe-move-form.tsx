'use client'

import { useEffect, useId, useRef, useState } from 'react'
import { SelectField } from '@/app/_components/field'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { moveTreesAction } from '@/app/(office)/recipes/actions'
import type { NewerVersion } from '@/lib/queries/newer-versions'
import { coatsInShort } from '@/lib/recipes/coat-cells'

export type RecipeMoveFormProps = { treeId: string; versions: readonly NewerVersion[]; coatsOn: number; onDone: () => void }

/** Moves one tree to a newer version of its recipe, with what would come onto it then. */
export function RecipeMoveForm({ treeId, versions, coatsOn, onDone }: RecipeMoveFormProps) {
  const [versionId, setVersionId] = useState(versions[0]?.versionId ?? '')
  const form = useKeptForm(moveTreesAction, onDone)
  const box = useRef<HTMLDivElement>(null)
  const hintId = useId()
  useEffect(() => {
    box.current?.scrollIntoView({ block: 'center' })
    box.current?.querySelector('select')?.focus({ preventScroll: true })
  }, [])
  const chosen = versions.find((version) => version.versionId === versionId)
  return (
    <div ref={box} className="grid gap-2">
      <form {...form.formProps} className="reason-form">
        <input type="hidden" name="treeId" value={treeId} />
        <SelectField
          name="versionId"
          label="Version of the recipe"
          value={versionId}
          onChange={(event) => setVersionId(event.currentTarget.value)}
          error={form.errorOf('versionId')}
          aria-describedby={hintId}
        >
          {versions.map(({ versionId: id, version, coats }) => (
            <option key={id} value={id}>
              Version {version}, {coats.length} {coats.length === 1 ? 'coat' : 'coats'}
            </option>
          ))}
        </SelectField>
        <Key type="submit" tone="ink" isOff={form.isPending || chosen?.refusal != null}>
          Move it
        </Key>
      </form>
      <div id={hintId} aria-live="polite" className="grid gap-1 text-15">
        {chosen !== undefined && chosen.refusal === null && (
          <p>
            {coatsOn === 0 ? 'To come: ' : `The ${coatsOn} on ${coatsOn === 1 ? 'stays' : 'stay'} as they are. To come: `}
            {coatsInShort(chosen.coats.slice(coatsOn))}.
          </p>
        )}
        {chosen !== undefined && chosen.refusal !== null && <p className="font-semibold">{chosen.refusal}</p>}
        {chosen !== undefined && chosen.note !== '' && (
          <p className="text-soot [overflow-wrap:anywhere]">Why there is this version: {chosen.note}</p>
        )}
      </div>
      <FormMessage state={form.state} />
    </div>
  )
}
