'use client'

import { useQueryClient } from '@tanstack/react-query'
import { useState } from 'react'
import { Key } from '@/app/_components/key'
import { removeDevice } from '@/app/_components/push-browser'
import { PUSH_KEY, usePush } from '@/app/_components/use-push'
import { formatMoment } from '@/lib/format/local-time'
import type { PushDevice } from '@/lib/notices/push-contract'

/** Every device of the member that hears of the shell room, so that a lost phone can be turned off from here. */
export function DeviceList({ timeZone }: { timeZone: string }) {
  const client = useQueryClient()
  const { view } = usePush()
  const [refused, setRefused] = useState<string | null>(null)
  const devices = view?.list.devices ?? []
  if (!view) return <p>Reading the list.</p>
  if (devices.length === 0) return <p>No device yet. Turn notices on with the device in your hand.</p>

  const turnOff = async (device: PushDevice) => {
    setRefused(null)
    try {
      await removeDevice({ id: device.id })
    } catch (error) {
      setRefused(error instanceof Error ? error.message : 'That did not work. Try again.')
    }
    await client.invalidateQueries({ queryKey: PUSH_KEY })
  }

  return (
    <>
      <ul className="flex flex-col gap-3">
        {devices.map((device) => (
          <li key={device.id} className="flex flex-wrap items-center gap-x-4 gap-y-2">
            <span className="grow">
              <b>{device.label || 'Browser'}</b>
              {device.id === view.device?.id && ', this device'}
              <br />
              {device.scope === 'every tree' ? 'Every tree' : 'Only trees you asked about'}. {lastWords(device, timeZone)}
            </span>
            {device.id !== view.device?.id && (
              <Key tone="quiet" aria-label={`Turn off ${device.label || 'browser'}`} onPress={() => void turnOff(device)}>
                Turn off
              </Key>
            )}
          </li>
        ))}
      </ul>
      <output className="block min-h-6" aria-live="polite">
        {refused}
      </output>
    </>
  )
}

function lastWords(device: PushDevice, timeZone: string): string {
  const now = Date.now()
  if (device.isOutdated) return 'The server has changed its keys: turn it on again there.'
  if (device.failingSince !== null) return `Failing since ${formatMoment(device.failingSince, now, timeZone)}. ${device.lastError ?? ''}`
  return device.lastOkAt === null ? 'Nothing sent yet.' : `Last notice ${formatMoment(device.lastOkAt, now, timeZone)}.`
}
