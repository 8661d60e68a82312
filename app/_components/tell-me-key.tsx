'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import { Key, type KeySize } from '@/app/_components/key'
import { call, Refused } from '@/app/_components/push-browser'
import { usePush } from '@/app/_components/use-push'

/** 'Tell me when dry' on a tree's page. Offers to turn notices on where this device would not hear of it. */
export function TellMeKey({ treeId, isWatched, size = 44 }: { treeId: string; isWatched: boolean; size?: KeySize }) {
  const router = useRouter()
  const push = usePush()
  const [isOn, setIsOn] = useState(isWatched)
  const [isSending, setIsSending] = useState(false)
  const [refusal, setRefusal] = useState<string | null>(null)

  const toggle = async () => {
    if (isSending) return
    setIsSending(true)
    setRefusal(null)
    try {
      await call(isOn ? 'DELETE' : 'POST', `/api/v1/trees/${treeId}/watch`)
      setIsOn(!isOn)
      router.refresh()
    } catch (error) {
      setRefusal(error instanceof Refused ? error.message : 'That did not work. Try again.')
    }
    setIsSending(false)
  }

  const state = push.view?.state
  const canOffer = isOn && (state === 'off' || state === 'outdated')
  return (
    <div className="flex flex-col gap-2">
      <Key size={size} icon="bell" isChosen={isOn} isOff={isSending} onPress={() => void toggle()}>
        Tell me when dry
      </Key>
      {canOffer && (
        <Key size={size} tone="go" isOff={push.isBusy} onPress={() => void push.turnOn('watched trees')}>
          Notify me on this device
        </Key>
      )}
      <output className="block text-[15px]" aria-live="polite">
        {refusal ?? push.words ?? hint(isOn, state)}
      </output>
    </div>
  )
}

function hint(isOn: boolean, state: string | undefined): string | null {
  if (!isOn || state === undefined || state === 'on' || state === 'failing') return null
  return canBeOffered(state) ? 'Notices are off on this device.' : 'This device cannot show notices. See your own page.'
}

const canBeOffered = (state: string) => state === 'off' || state === 'outdated'
