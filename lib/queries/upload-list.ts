import { QueryTypes } from 'sequelize'
import type { UploadState } from '@/lib/uploads/upload-state'
import { database, Upload } from '@/models'

export type UploadLine = {
  id: string
  fileName: string
  sensorName: string
  /** Null: somebody whose demo data was removed. */
  authorName: string | null
  state: UploadState
  sizeBytes: number
  bytesDone: number
  added: number
  repeated: number
  marked: number
  rejected: number
  createdAt: number
  finishedAt: number | null
  error: string | null
}

const ROWS = 30

const LINE = `u.id, u.file_name AS fileName, s.name AS sensorName, m.name AS authorName, u.state, u.size_bytes AS sizeBytes,
  u.bytes_done AS bytesDone, u.added, u.repeated, u.marked, u.rejected, u.created_at AS createdAt, u.finished_at AS finishedAt, u.error
  FROM uploads u JOIN sensors s ON s.id = u.sensor_id LEFT JOIN members m ON m.id = u.created_by`

/** The newest uploads. Drafts that were put away are left out. */
export function loadUploadList(): Promise<UploadLine[]> {
  return database.query<UploadLine>(
    `SELECT ${LINE} WHERE u.settings IS NOT NULL OR u.state = 'draft' ORDER BY u.created_at DESC, u.id DESC LIMIT ${ROWS}`,
    { type: QueryTypes.SELECT },
  )
}

export type UploadDetail = UploadLine & {
  sensorId: number
  /** An earlier upload of the same file for the same sensor that was read to its end. */
  repeatOf: { id: string; finishedAt: number } | null
}

/** One upload with what stands around it; null where there is none. */
export async function loadUploadDetail(uploadId: string): Promise<UploadDetail | null> {
  const upload = await Upload.findByPk(uploadId)
  if (!upload) return null
  const [[line], earlier] = await Promise.all([
    database.query<UploadLine>(`SELECT ${LINE} WHERE u.id = :uploadId`, { type: QueryTypes.SELECT, replacements: { uploadId } }),
    database.query<{ id: string; finishedAt: number }>(
      `SELECT id, finished_at AS finishedAt FROM uploads
        WHERE sensor_id = :sensorId AND sha256 = :sha256 AND state = 'done' AND created_at < :createdAt
        ORDER BY finished_at DESC LIMIT 1`,
      { type: QueryTypes.SELECT, replacements: { sensorId: upload.sensorId, sha256: upload.sha256, createdAt: upload.createdAt } },
    ),
  ])
  return line ? { ...line, sensorId: upload.sensorId, repeatOf: earlier[0] ?? null } : null
}
