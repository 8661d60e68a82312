'use client'

import { unstable_rethrow } from 'next/navigation'
import { useState } from 'react'
import { FieldError } from '@/app/_components/field'
import { Key } from '@/app/_components/key'
import { issueTokenAction, type IssuedToken } from '@/app/(office)/settings/sensors/actions'

const NO_ANSWER = 'No answer from the server, so no token to show. Try again; revoke the one that is not used.'

/** Issues a token and shows it for this one time, with a line that sends a first reading. */
export function NewToken({ sensorId, sensorName }: { sensorId: number; sensorName: string }) {
  const [issued, setIssued] = useState<IssuedToken | null>(null)
  const [isPending, setIsPending] = useState(false)
  const issue = async () => {
    setIsPending(true)
    try {
      setIssued(await issueTokenAction(sensorId))
    } catch (error) {
      unstable_rethrow(error)
      setIssued({ status: 'refused', text: NO_ANSWER })
    } finally {
      setIsPending(false)
    }
  }
  if (issued?.status === 'issued') return <TokenPlate {...issued} sensorName={sensorName} onSeen={() => setIssued(null)} />
  return (
    <div className="grid justify-items-start gap-2">
      <Key isOff={isPending} aria-label={`Issue a token for ${sensorName}`} onPress={() => void issue()}>
        Issue a token
      </Key>
      <FieldError id={`token-${sensorId}-error`} error={issued?.text} />
    </div>
  )
}

/** A token, this one time, and a line that sends a first reading with it. */
export function TokenPlate({
  token,
  address,
  sensorName,
  onSeen,
}: {
  token: string
  address: string
  sensorName: string
  onSeen: () => void
}) {
  return (
    <section className="token-plate" aria-label={`New token of ${sensorName}`}>
      <p>
        <b>This token is shown once.</b> Put it into the logger now; afterwards only its first letters stand here.
      </p>
      <CopyLine label="Token" text={token} />
      <CopyLine label="A first reading, from a terminal" text={firstReading(address, token)} />
      <Key onPress={onSeen}>I have it</Key>
    </section>
  )
}

/** `date` fills in the present where it is run. */
function firstReading(address: string, token: string): string {
  const reading = `{"readings":[{"measuredAt":"'$(date -u +%Y-%m-%dT%H:%M:%SZ)'","airTempC":21.0,"relHumidityPct":50}]}`
  return `curl -X POST ${address} -H 'authorization: Bearer ${token}' -H 'content-type: application/json' -d '${reading}'`
}

function CopyLine({ label, text }: { label: string; text: string }) {
  const [said, setSaid] = useState('')
  const copy = async () => {
    try {
      await navigator.clipboard.writeText(text)
      setSaid('Copied.')
    } catch {
      // Browsers give the clipboard to secure pages only.
      setSaid('This browser does not let it be copied. Mark the text and copy it by hand.')
    }
  }
  return (
    <div className="copy-line">
      <span className="label">{label}</span>
      <code>{text}</code>
      <span className="copy-key">
        <Key aria-label={`Copy: ${label}`} onPress={() => void copy()}>
          Copy
        </Key>
        <output aria-live="polite">{said}</output>
      </span>
    </div>
  )
}
