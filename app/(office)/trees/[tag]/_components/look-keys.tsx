'use client'

import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import { useOperation } from '@/app/(office)/_components/use-operation'

export type LookKeysProps = {
  treeId: string
  /** Newest word on this coat, already in words: 'Wren, 12:20: not yet'. */
  said: string | null
}

/** A person's word on the newest coat, in one press. */
export function LookKeys({ treeId, said }: LookKeysProps) {
  const look = useOperation(`/api/v1/trees/${treeId}/looks`)
  return (
    <div className="look-keys">
      <p id={`look-${treeId}`}>How does it look?</p>
      <div className="look-pair" role="group" aria-labelledby={`look-${treeId}`}>
        <Key icon="check" isOff={look.isPending} onPress={() => look.send({ verdict: 'looks dry' })}>
          Looks dry
        </Key>
        <Key icon="drop" isOff={look.isPending} onPress={() => look.send({ verdict: 'not yet' })}>
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
