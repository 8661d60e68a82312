import { sizeOf } from '@/lib/server/disk'
import { errorsFile } from '@/lib/server/upload-files'
import type { UploadStatus } from '@/lib/uploads/upload-contract'
import { Upload } from '@/models'

/** How an upload stands; null where there is none. */
export async function loadUploadStatus(uploadId: string): Promise<UploadStatus | null> {
  const upload = await Upload.findByPk(uploadId)
  if (!upload) return null
  const { sensorId, fileName, state, sizeBytes, bytesDone, added, repeated, marked, rejected, createdAt, startedAt, finishedAt, error } =
    upload
  return {
    uploadId,
    sensorId,
    fileName,
    state,
    sizeBytes,
    bytesDone,
    added,
    repeated,
    marked,
    rejected,
    createdAt,
    startedAt: startedAt ?? null,
    finishedAt: finishedAt ?? null,
    error: error ?? null,
  }
}

/** Whether there is work for the worker: any upload that waits or is being read, or this one. */
export async function hasOpenUpload(uploadId?: string): Promise<boolean> {
  return (await Upload.count({ where: { state: ['waiting', 'running'], ...(uploadId !== undefined && { id: uploadId }) } })) > 0
}

/** The file of the refused rows of an upload, and how much of it is good; null where there is none. */
export async function loadUploadErrors(uploadId: string): Promise<{ file: string; bytes: number; fileName: string } | null> {
  const upload = await Upload.findByPk(uploadId)
  if (!upload || upload.errorsBytes === 0) return null
  const file = errorsFile(uploadId)
  // Pruned, or left behind when the records were moved to another machine.
  if ((await sizeOf(file)) < upload.errorsBytes) return null
  return { file, bytes: upload.errorsBytes, fileName: upload.fileName }
}
