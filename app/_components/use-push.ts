'use client'

import { useQuery, useQueryClient } from '@tanstack/react-query'
import { useState } from 'react'
import {
  endpointHash,
  fetchDevices,
  forgetThisBrowser,
  ownSubscription,
  pushSupport,
  Refused,
  saveDevice,
  subscribeBrowser,
  testDevice,
  type PushSupport,
} from '@/app/_components/push-browser'
import { rememberedScope } from '@/app/_components/push-mark'
import type { PushDevice, PushDevices, PushScope } from '@/lib/notices/push-contract'

/** How notices stand on this device. */
export type PushState = Exclude<PushSupport, 'ok'> | 'off' | 'on' | 'failing' | 'outdated'

type PushView = { state: PushState; device: PushDevice | null; list: PushDevices }

export const PUSH_KEY = ['push devices'] as const

async function readPush(): Promise<PushView> {
  const support = pushSupport()
  const list = await fetchDevices()
  if (support !== 'ok') return { state: support, device: null, list }
  const subscription = await ownSubscription()
  if (!subscription) return { state: 'off', device: null, list }
  const hash = await endpointHash(subscription)
  const device = list.devices.find((candidate) => candidate.endpointHash === hash) ?? null
  if (device) return { state: device.isOutdated ? 'outdated' : device.failingSince === null ? 'on' : 'failing', device, list }
  // Browsers change a subscription without a word; one that was turned on for this member is handed in again.
  const scope = rememberedScope(list.memberId)
  if (scope === null || Notification.permission !== 'granted') return { state: 'off', device: null, list }
  await saveDevice(subscription, list, scope)
  const renewed = await fetchDevices()
  return { state: 'on', device: renewed.devices.find((candidate) => candidate.endpointHash === hash) ?? null, list: renewed }
}

export type Push = {
  /** Undefined until the browser and the server have been asked. */
  view: PushView | undefined
  isBusy: boolean
  /** What came of the last press, as a sentence. */
  words: string | null
  turnOn: (scope: PushScope) => Promise<boolean>
  turnOff: () => Promise<boolean>
  test: () => Promise<boolean>
}

/** Notices on this device: how they stand, and the presses that change it. */
export function usePush(): Push {
  const client = useQueryClient()
  const { data: view, error } = useQuery({ queryKey: PUSH_KEY, queryFn: readPush, staleTime: 30_000 })
  const [isBusy, setIsBusy] = useState(false)
  const [words, setWords] = useState<string | null>(null)

  /** One press at a time; a refusal becomes its sentence. */
  const act = async (work: () => Promise<string>): Promise<boolean> => {
    if (isBusy) return false
    setIsBusy(true)
    setWords(null)
    try {
      setWords(await work())
      return true
    } catch (refusal) {
      setWords(refusal instanceof Refused ? refusal.message : 'That did not work. Try again.')
      return false
    } finally {
      setIsBusy(false)
      await client.invalidateQueries({ queryKey: PUSH_KEY })
    }
  }

  return {
    view,
    isBusy,
    words: words ?? (error && !view ? 'The list of your devices could not be read.' : null),
    turnOn: (scope) =>
      act(async () => {
        const list = view?.list ?? (await fetchDevices())
        await saveDevice(await subscribeBrowser(list.publicKey), list, scope)
        return scope === 'every tree' ? 'This device hears of every tree.' : 'This device hears of the trees you asked about.'
      }),
    turnOff: () =>
      act(async () => {
        await forgetThisBrowser()
        return 'Notices are off on this device.'
      }),
    test: () =>
      act(async () => {
        const device = view?.device
        if (!device) throw new Refused('Turn notices on first.')
        return (await testDevice({ id: device.id })).words
      }),
  }
}

/** Compares this browser's subscription with the server's list once per page load, where notices were turned on before. */
export function useKeptPush(): void {
  useQuery({ queryKey: PUSH_KEY, queryFn: readPush, staleTime: Infinity })
}
