'use client'

import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import type { Spot } from '@/lib/coats/vocabulary'
import { useOperation } from '@/app/(office)/_components/use-operation'

export type LookKeysProps = {
  treeId: string
  coatNumber: number
  /** The spot that dries last. */
  spot: Spot
  /** Newest word on this coat, already in words: 'Wren, 12:20: not yet'. */
  said: string | null
}

/** A person's word on the newest coat, in one press. */
export function LookKeys({ treeId, coatNumber, spot, said }: LookKeysProps) {
  const look = useOperation(`/api/v1/trees/${treeId}/evidence`)
  return (
    <div className="look-keys">
      <p id={`look-${treeId}`}>How does the {spot} feel?</p>
      <div className="look-pair" role="group" aria-labelledby={`look-${treeId}`}>
        <Key icon="check" isOff={look.isPending} onPress={() => look.send({ kind: 'touch', coatNumber, spot, verdict: 'dry' })}>
          Felt dry
        </Key>
        <Key icon="drop" isOff={look.isPending} onPress={() => look.send({ kind: 'touch', coatNumber, spot, verdict: 'not yet' })}>
          Not yet
        </Key>
      </div>
      <p className="look-said" role="status">
        {look.problem !== null ? (
          <span className="field-error">
            <Icon name="warning" />
            <span>{look.problem}</span>
          </span>
        ) : (
          said
        )}
      </p>
    </div>
  )
}
