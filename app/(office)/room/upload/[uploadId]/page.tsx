import type { Metadata } from 'next'
import { notFound } from 'next/navigation'
import { Icon } from '@/app/_components/icons'
import { KeyLink } from '@/app/_components/key'
import { ActForm } from '@/app/(office)/settings/_components/act-form'
import { PreviewForm } from '@/app/(office)/room/upload/_components/preview-form'
import { UploadProgress } from '@/app/(office)/room/upload/_components/upload-progress'
import { cancelUploadAction } from '@/app/(office)/room/upload/actions'
import '@/app/(office)/room/upload/upload.css'
import { systemClock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { formatBytes } from '@/lib/format/bytes'
import { formatMoment } from '@/lib/format/local-time'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { loadUploadDetail } from '@/lib/queries/upload-list'
import { loadUploadPreview } from '@/lib/queries/upload-preview'
import { loadUploadStatus } from '@/lib/queries/upload-status'
import { requireMemberPage } from '@/lib/server/auth'
import type { UploadPreview } from '@/lib/uploads/upload-contract'
import { isEnded } from '@/lib/uploads/upload-state'

export const metadata: Metadata = { title: 'Readings from a file' }

/** One file: how it is to be read, how far it is, and what it has brought. */
export default async function UploadDetailPage({ params }: PageProps<'/room/upload/[uploadId]'>) {
  const { uploadId } = await params
  await requireMemberPage('sensors', `/room/upload/${uploadId}`)
  const [upload, status, { timeZone }] = await Promise.all([loadUploadDetail(uploadId), loadUploadStatus(uploadId), loadFoundry()])
  if (!upload || !status) notFound()
  const now = systemClock.now()
  const isDraft = upload.state === 'draft'
  const guess = isDraft ? await guessOf(uploadId) : null
  return (
    <>
      <div className="page-head">
        <div className="min-w-0 grow">
          <h1 className="upload-title">{upload.fileName}</h1>
          <p>
            {formatBytes(upload.sizeBytes)} for {upload.sensorName}, brought {formatMoment(upload.createdAt, now, timeZone)}
            {upload.authorName !== null && ` by ${upload.authorName}`}.
          </p>
        </div>
        <KeyLink href="/room/upload">All files</KeyLink>
        {!isEnded(upload.state) && (
          <ActForm isHeldKey={!isDraft} action={cancelUploadAction.bind(null, uploadId, isDraft)}>
            {isDraft ? 'Put this file away' : 'Hold to stop'}
          </ActForm>
        )}
      </div>
      {upload.repeatOf && isDraft && (
        <p className="upload-repeat">
          <Icon name="warning" />
          <span>
            This file was read on {formatMoment(upload.repeatOf.finishedAt, now, timeZone)} for the same sensor. Read once more it changes
            nothing: all of its rows are known.
          </span>
        </p>
      )}
      {!isDraft && <UploadProgress known={status} />}
      {isDraft && guess === null && <p className="upload-waits">The file is not kept any more. Put it away, and bring it again.</p>}
      {guess && <PreviewForm uploadId={uploadId} guess={guess} timeZone={timeZone} sensorName={upload.sensorName} />}
    </>
  )
}

/** How the file seems to be written; null when it is not kept any more. */
async function guessOf(uploadId: string): Promise<UploadPreview | null> {
  try {
    return await loadUploadPreview(uploadId, null, { clock: systemClock })
  } catch (error) {
    if (error instanceof AppError && error.code === 'not_found') return null
    throw error
  }
}
