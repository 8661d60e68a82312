'use client'

import { Key } from '@/app/_components/key'
import { usePush, type PushState } from '@/app/_components/use-push'
import { formatMoment } from '@/lib/format/local-time'
import type { PushDevice as Device } from '@/lib/notices/push-contract'

/** What each state means, before any key. */
const EXPLAINED: Record<PushState, string> = {
  unsupported: 'This browser cannot show notices. Use a current Chrome, Edge, Firefox or Safari.',
  insecure: 'Notices need a secure address: open Kilnward by https, or on the server itself as localhost.',
  'install first': 'On iPhone and iPad, add Kilnward to the home screen first: Share, then Add to Home Screen. Open it from there.',
  blocked: 'Notices are blocked for Kilnward in this browser. Allow them in the browser’s settings for this address, then come back.',
  off: 'Off. This device does not hear of the shell room.',
  on: 'On.',
  failing: 'On, but the last notices did not get through.',
  outdated: 'Off since the server changed its keys. Turn notices on again.',
}

/** Notices on this device: what they are, how they stand here, and the keys to change it. */
export function PushDevice({ timeZone }: { timeZone: string }) {
  const push = usePush()
  const { view, isBusy, words } = push
  return (
    <div className="flex flex-col gap-4">
      <p className="max-w-[62ch]">
        A notice comes when a coat may be dipped over, when a tree is overdue, when its last coat is on, when it is ready for burnout, and
        when a room sends no readings. It shows tag and dip, no names. A shared tablet is better left off.
      </p>
      {view && <p className="font-semibold">{stateWords(view.state, view.device, timeZone)}</p>}
      {view && (view.state === 'off' || view.state === 'outdated') && (
        <div className="flex flex-wrap gap-3">
          <Key tone="go" size={56} isOff={isBusy} onPress={() => void push.turnOn('every tree')}>
            Notify me on this device
          </Key>
        </div>
      )}
      {view?.device && (view.state === 'on' || view.state === 'failing') && (
        <>
          <fieldset className="flex flex-wrap gap-3">
            <legend className="sr-only">What this device hears of</legend>
            <Key isChosen={view.device.scope === 'every tree'} isOff={isBusy} onPress={() => void push.turnOn('every tree')}>
              Every tree
            </Key>
            <Key isChosen={view.device.scope === 'watched trees'} isOff={isBusy} onPress={() => void push.turnOn('watched trees')}>
              Only trees I asked about
            </Key>
          </fieldset>
          <div className="flex flex-wrap gap-3">
            <Key isOff={isBusy} onPress={() => void push.test()}>
              Send a test
            </Key>
            <Key tone="quiet" isOff={isBusy} onPress={() => void push.turnOff()}>
              Turn off
            </Key>
          </div>
        </>
      )}
      <output className="block min-h-6" aria-live="polite">
        {isBusy ? 'One moment.' : words}
      </output>
    </div>
  )
}

function stateWords(state: PushState, device: Device | null, timeZone: string): string {
  const since = device?.failingSince
  if (state !== 'failing' || typeof since !== 'number') return EXPLAINED[state]
  const reason = device?.lastError ? ` ${device.lastError}` : ''
  return `On, but failing since ${formatMoment(since, Date.now(), timeZone)}.${reason}`
}
