'use client'

import { useState } from 'react'
import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import type { FanState } from '@/lib/drying/types'
import type { Queue } from '@/lib/queue/contract'
import { fanReason } from '@/lib/room/fan-words'
import type { PlaceFans } from '@/lib/room/fans-contract'
import { newOperationId } from '../_queries/operation-id'
import { refusalWords } from '../_queries/request-json'
import { postFans } from '../_queries/writes'
import './fan-line.css'
import { SheetProblem } from './sheet-problem'

export type FanLineProps = {
  place: Queue['places'][number]
  fans: PlaceFans
  queue: Queue
  canSwitch: boolean
  onSaid: (words: string) => void
}

/** The fans of one place as the clock counts them, and the key that says that they were switched. */
export function FanLine({ place, fans, queue, canSwitch, onSaid }: FanLineProps) {
  const [trouble, setTrouble] = useState<string>()
  const [isSending, setIsSending] = useState(false)
  // One id for one word, however often it has to be sent.
  const [attempt, setAttempt] = useState<{ state: FanState; operationId: string } | null>(null)
  const moment = { now: queue.now, timeZone: queue.foundry.timeZone }

  const say = async (state: FanState) => {
    if (isSending) return
    const operationId = attempt?.state === state ? attempt.operationId : newOperationId()
    setAttempt({ state, operationId })
    setTrouble(undefined)
    setIsSending(true)
    const outcome = await postFans(place.id, operationId, state)
    setIsSending(false)
    if (outcome.kind !== 'unreachable') setAttempt(null)
    if (outcome.kind === 'done') {
      onSaid(state === 'timetable' ? `${place.name}: fans by the timetable again.` : `${place.name}: fans ${state}.`)
    } else if (outcome.kind === 'refused') setTrouble(refusalWords(outcome.status, outcome.problem))
    else setTrouble(`Not noted yet. ${outcome.detail} Try again.`)
  }

  return (
    <>
      <div className="fan-line">
        <p>
          <b>{place.name}</b>
          <span className={fans.isOn ? 'state state-verdigris' : 'state'}>
            <Icon name={fans.isOn ? 'check' : 'minus'} />
            fans {fans.isOn ? 'on' : 'off'}
          </span>
          <span className="text-soot">{fanReason(fans, moment)}</span>
        </p>
        {canSwitch && (
          <div>
            {fans.said !== null && (
              <Key size={64} isOff={isSending} onPress={() => void say('timetable')} aria-label={`${place.name}: by the timetable again`}>
                By the timetable
              </Key>
            )}
            <Key
              size={64}
              isOff={isSending}
              onPress={() => void say(fans.isOn ? 'off' : 'on')}
              aria-label={`${place.name}: fans are ${fans.isOn ? 'off' : 'on'} now`}
            >
              Fans are {fans.isOn ? 'off' : 'on'} now
            </Key>
          </div>
        )}
      </div>
      {trouble && <SheetProblem title="Not noted" detail={trouble} />}
    </>
  )
}
