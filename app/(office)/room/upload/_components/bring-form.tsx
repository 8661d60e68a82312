'use client'

import { useMutation } from '@tanstack/react-query'
import { useRouter } from 'next/navigation'
import { useState } from 'react'
import { z } from 'zod'
import { Field, SelectField } from '@/app/_components/field'
import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import { formatBytes } from '@/lib/format/bytes'
import { formText } from '@/lib/format/form-text'
import { LARGEST_UPLOAD_BYTES } from '@/lib/uploads/upload-contract'

const problemDocument = z.object({ detail: z.string() })
const answer = z.object({ uploadId: z.uuid() })

/** A refusal that the server put in words. */
class Refusal extends Error {
  override readonly name = 'Refusal'
}

async function send(sensorId: string, file: File): Promise<string> {
  const response = await fetch(`/api/v1/uploads?${new URLSearchParams({ sensorId, fileName: file.name })}`, {
    method: 'POST',
    headers: { 'content-type': 'text/csv' },
    body: file,
  })
  const body: unknown = await response.json().catch(() => null)
  if (response.ok) return answer.parse(body).uploadId
  const problem = problemDocument.safeParse(body)
  throw new Refusal(problem.success ? problem.data.detail : 'The server could not take the file. Try again.')
}

type Complaints = { sensorId?: string; file?: string }

/** A sensor and a file; the next page shows how the file is read. */
export function BringForm({ sensors, chosenId }: { sensors: readonly { id: number; name: string }[]; chosenId: number | null }) {
  const router = useRouter()
  const [complaints, setComplaints] = useState<Complaints>({})
  const [file, setFile] = useState<File | null>(null)
  const sending = useMutation({
    mutationFn: ({ sensorId, file: chosen }: { sensorId: string; file: File }) => send(sensorId, chosen),
    onSuccess: (uploadId) => router.push(`/room/upload/${uploadId}`),
  })
  const isBusy = sending.isPending || sending.isSuccess
  const { error } = sending
  return (
    <form
      className="upload-bring"
      noValidate
      method="post"
      onSubmit={(event) => {
        event.preventDefault()
        if (isBusy) return
        const sensorId = formText(new FormData(event.currentTarget), 'sensorId')
        const found: Complaints = {
          ...(sensorId === '' && { sensorId: 'Choose the sensor that measured it.' }),
          ...(file === null && { file: 'Choose a file.' }),
          ...(file !== null &&
            file.size > LARGEST_UPLOAD_BYTES && { file: `At most ${formatBytes(LARGEST_UPLOAD_BYTES)}. Split it by years.` }),
          ...(file !== null && file.size === 0 && { file: 'This file is empty.' }),
        }
        setComplaints(found)
        if (file !== null && Object.keys(found).length === 0) sending.mutate({ sensorId, file })
      }}
    >
      <SelectField name="sensorId" label="Sensor that measured it" defaultValue={chosenId ?? ''} error={complaints.sensorId}>
        <option value="" disabled>
          Choose a sensor
        </option>
        {sensors.map((sensor) => (
          <option key={sensor.id} value={sensor.id}>
            {sensor.name}
          </option>
        ))}
      </SelectField>
      <Field
        name="file"
        label="File"
        type="file"
        accept=".csv,.txt,.tsv,.log,text/csv,text/plain"
        error={complaints.file}
        onChange={(event) => setFile(event.currentTarget.files?.[0] ?? null)}
      />
      <div className="upload-bring-foot">
        <Key type="submit" tone="go" isOff={isBusy}>
          {isBusy ? `Sending${file === null ? '' : ` ${formatBytes(file.size)}`}` : 'Look at the file'}
        </Key>
        <div aria-live="polite">
          {error !== null && (
            <p className="field-error">
              <Icon name="warning" />
              <span>{error instanceof Refusal ? error.message : 'No answer from the server. Try again.'}</span>
            </p>
          )}
        </div>
      </div>
    </form>
  )
}
