'use client'

import { useState } from 'react'
import { FieldError } from '@/app/_components/field'
import { Key } from '@/app/_components/key'
import { fittedTagHeight, Tag } from '@/app/_components/tag'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { moveTreesAction } from '@/app/(office)/recipes/actions'

export type MoveTreesProps = {
  versionId: string
  version: number
  trees: { id: string; tag: string; isHeld: boolean; version: number; coatsOn: number; refusal: string | null }[]
}

/** Trees on older versions, to be moved to the newest, several at once. Those that cannot move say why. */
export function MoveTrees({ versionId, version, trees }: MoveTreesProps) {
  const [ticked, setTicked] = useState<ReadonlySet<string>>(new Set())
  const form = useKeptForm(moveTreesAction, () => setTicked(new Set()))
  const movable = trees.filter(({ refusal }) => refusal === null)
  const isTicked = (id: string) => ticked.has(id)
  const count = movable.filter(({ id }) => isTicked(id)).length
  return (
    <form {...form.formProps} className="grid gap-3">
      <input type="hidden" name="versionId" value={versionId} />
      {trees.length === 0 && <p className="text-soot">No open tree stands on an older version.</p>}
      <ul className="move-rows">
        {trees.map((tree) => (
          <li key={tree.id}>
            {tree.refusal === null ? (
              <label className="tick">
                <input
                  type="checkbox"
                  name="treeId"
                  value={tree.id}
                  checked={isTicked(tree.id)}
                  onChange={(event) => {
                    const next = new Set(ticked)
                    if (event.currentTarget.checked) next.add(tree.id)
                    else next.delete(tree.id)
                    setTicked(next)
                  }}
                />
                <Tag tag={tree.tag} height={fittedTagHeight(tree.tag, 32)} isHeld={tree.isHeld} />
                <span>
                  version {tree.version}, {tree.coatsOn} on
                </span>
              </label>
            ) : (
              <p className="move-refused">
                <Tag tag={tree.tag} height={fittedTagHeight(tree.tag, 32)} isHeld={tree.isHeld} />
                <span className="text-soot">{tree.refusal}</span>
              </p>
            )}
          </li>
        ))}
      </ul>
      <FieldError id={`move-${versionId}`} error={form.errorOf('treeIds')} />
      <div className="flex flex-wrap items-center gap-3">
        {movable.length > 0 && (
          <Key type="submit" tone="go" isOff={form.isPending}>
            {count === 0 ? `Move to version ${version}` : `Move ${count} to version ${version}`}
          </Key>
        )}
        {movable.length > 1 && (
          <Key tone="quiet" onPress={() => setTicked(count === movable.length ? new Set() : new Set(movable.map(({ id }) => id)))}>
            {count === movable.length ? 'Tick none' : 'Tick all'}
          </Key>
        )}
        <FormMessage state={form.state} />
      </div>
    </form>
  )
}
