import type { Metadata } from 'next'
import { KeyLink } from '@/app/_components/key'
import { EmptyState } from '@/app/(office)/_components/empty-state'
import { BringForm } from '@/app/(office)/room/upload/_components/bring-form'
import { UploadRows } from '@/app/(office)/room/upload/_components/upload-rows'
import { systemClock } from '@/lib/core/clock'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { loadUploadList } from '@/lib/queries/upload-list'
import { requireMemberPage } from '@/lib/server/auth'
import './upload.css'

export const metadata: Metadata = { title: 'Readings from a file' }

/** Files of readings, from any logger: bringing one, and what became of the last ones. */
export default async function UploadPage({ searchParams }: PageProps<'/room/upload'>) {
  await requireMemberPage('sensors', '/room/upload')
  const { sensor } = await searchParams
  const [uploads, { sensors, timeZone }] = await Promise.all([loadUploadList(), loadFoundry()])
  const chosenId = sensors.find(({ id }) => String(id) === sensor)?.id ?? (sensors.length === 1 ? sensors[0]?.id : undefined) ?? null
  return (
    <>
      <div className="page-head">
        <div className="min-w-0 grow">
          <h1>Readings from a file</h1>
          <p>What a logger has kept, of any age. Coats that dried in that air are worked out anew from it.</p>
        </div>
        <KeyLink href="/room">Back to the room</KeyLink>
      </div>
      {sensors.length === 0 ? (
        <EmptyState
          title="No sensor in use"
          action={
            <KeyLink href="/settings/sensors" tone="go" icon="plus">
              Add a sensor
            </KeyLink>
          }
        >
          Readings belong to a sensor. Once there is one, its files are brought here.
        </EmptyState>
      ) : (
        <section className="plate">
          <header>
            <h2>Bring a file</h2>
            <p>CSV or text, as the logger writes it; you see how it is read before anything counts</p>
          </header>
          <div className="plate-body">
            <BringForm sensors={sensors} chosenId={chosenId} />
          </div>
        </section>
      )}
      {sensors.length > 0 && (
        <section className="plate upload-list" aria-label="Files brought">
          <header>
            <h2>Files brought</h2>
            <p>the newest first</p>
          </header>
          {uploads.length === 0 ? (
            <EmptyState title="No file yet">Each file that was brought will stand here, with how many of its rows were new.</EmptyState>
          ) : (
            <UploadRows uploads={uploads} now={systemClock.now()} timeZone={timeZone} />
          )}
        </section>
      )}
    </>
  )
}
