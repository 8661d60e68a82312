'use client'

import { useState } from 'react'
import { Field } from '@/app/_components/field'
import { HoldKey } from '@/app/_components/hold-key'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { TokenPlate } from '@/app/(office)/settings/sensors/_components/new-token'
import { replaceDeviceAction } from '@/app/(office)/settings/sensors/actions'

export type DeviceFormProps = {
  sensor: { id: number; name: string; kind: 'logger' | 'wall hygrometer' }
  /** The door to which a logger sends. */
  address: string
}

/** Another device takes over under the same name; the token of a logger is shown this one time. */
export function DeviceForm({ sensor, address }: DeviceFormProps) {
  const [isOpen, setIsOpen] = useState(false)
  const [isSeen, setIsSeen] = useState(false)
  const form = useKeptForm(replaceDeviceAction.bind(null, sensor.id), () => {
    setIsOpen(false)
    setIsSeen(false)
  })
  const token = form.state.status === 'done' ? form.state.secret : undefined
  return (
    <>
      {!isOpen && (
        <Key aria-expanded={false} onPress={() => setIsOpen(true)}>
          Replace the device
        </Key>
      )}
      {token !== undefined && !isSeen && !isOpen && (
        <TokenPlate token={token} address={address} sensorName={sensor.name} onSeen={() => setIsSeen(true)} />
      )}
      {!isOpen && token === undefined && <FormMessage state={form.state} />}
      {isOpen && (
        <form {...form.formProps} className="settings-form" aria-label="Replace the device">
          <p>
            Places, charts and history go on under {sensor.name}. The new device begins without an offset.
            {sensor.kind === 'logger' && ' The tokens of the old one end at once, and a new one is shown once.'}
          </p>
          <div className="form-grid">
            <Field
              name="since"
              label="Hung up"
              type="datetime-local"
              error={form.errorOf('since')}
              hint="Empty is now. Its offsets begin anew from then."
            />
            <Field name="serial" label="Serial number" maxLength={60} autoComplete="off" error={form.errorOf('serial')} />
            <Field
              name="note"
              label="Note"
              maxLength={200}
              autoComplete="off"
              error={form.errorOf('note')}
              hint="Make, and why the old one went."
            />
          </div>
          <div className="form-foot">
            <HoldKey size={44} isOff={form.isPending} onConfirm={form.submit}>
              Hold to replace it
            </HoldKey>
            <Key tone="quiet" onPress={() => setIsOpen(false)}>
              Leave it
            </Key>
            <FormMessage state={form.state} />
          </div>
        </form>
      )}
    </>
  )
}
