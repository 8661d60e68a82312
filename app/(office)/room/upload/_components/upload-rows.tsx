import Link from 'next/link'
import { StateWords } from '@/app/(office)/room/upload/_components/state-words'
import { formatMoment } from '@/lib/format/local-time'
import type { UploadLine } from '@/lib/queries/upload-list'
import { countText } from '@/lib/uploads/upload-state'

/** The newest files, each with what became of its rows. */
export function UploadRows({ uploads, now, timeZone }: { uploads: readonly UploadLine[]; now: number; timeZone: string }) {
  return (
    <table className="table upload-table">
      <thead>
        <tr>
          <th>File</th>
          <th>Sensor</th>
          <th>Brought</th>
          <th>How it stands</th>
          <th className="right">New</th>
          <th className="right">Known</th>
          <th className="right">Not counted</th>
          <th className="right">Not read</th>
        </tr>
      </thead>
      <tbody>
        {uploads.map((upload) => (
          <tr key={upload.id} className="link-row">
            <th scope="row">
              <Link className="row-link" href={`/room/upload/${upload.id}`} prefetch={false}>
                {upload.fileName}
              </Link>
            </th>
            <td>{upload.sensorName}</td>
            <td>
              {formatMoment(upload.createdAt, now, timeZone)}
              {upload.authorName !== null && `, ${upload.authorName}`}
            </td>
            <td>
              <StateWords upload={upload} />
            </td>
            {upload.state === 'draft' ? (
              <td colSpan={4} className="right">
                nothing of it counts yet
              </td>
            ) : (
              <>
                <Count words="new" count={upload.added} />
                <Count words="known" count={upload.repeated} />
                <Count words="not counted" count={upload.marked} />
                <Count words="not read" count={upload.rejected} />
              </>
            )}
          </tr>
        ))}
      </tbody>
    </table>
  )
}

function Count({ words, count }: { words: string; count: number }) {
  return (
    <td className="num right" data-words={words}>
      {countText(count)}
    </td>
  )
}
