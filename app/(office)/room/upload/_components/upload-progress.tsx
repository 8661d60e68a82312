'use client'

import { useQuery } from '@tanstack/react-query'
import { useRouter } from 'next/navigation'
import { useEffect, useId, useRef } from 'react'
import { Icon } from '@/app/_components/icons'
import { KeyLink } from '@/app/_components/key'
import { StateWords } from '@/app/(office)/room/upload/_components/state-words'
import { uploadStatus, type UploadStatus } from '@/lib/uploads/upload-contract'
import { countText, isEnded } from '@/lib/uploads/upload-state'

const LOOK_EVERY_MS = 1000

async function fetchStatus(uploadId: string): Promise<UploadStatus> {
  const response = await fetch(`/api/v1/uploads/${uploadId}`)
  if (!response.ok) throw new Error(`The upload answered ${response.status}.`)
  return uploadStatus.parse(await response.json())
}

/** How far a file is read, as it goes on; then what it has brought. */
export function UploadProgress({ known }: { known: UploadStatus }) {
  const { uploadId } = known
  const router = useRouter()
  const { data: status } = useQuery({
    queryKey: ['upload', uploadId],
    queryFn: () => fetchStatus(uploadId),
    initialData: known,
    refetchInterval: ({ state }) => (state.data && isEnded(state.data.state) ? false : LOOK_EVERY_MS),
  })
  const ended = isEnded(status.state)
  const wasEnded = useRef(ended)
  useEffect(() => {
    // The keys above the progress are the server's.
    if (ended && !wasEnded.current) router.refresh()
    wasEnded.current = ended
  }, [ended, router])
  const barId = useId()
  const percent = status.sizeBytes === 0 ? 0 : (100 * status.bytesDone) / status.sizeBytes
  return (
    <section className="plate">
      <header>
        <h2 id={barId}>
          <StateWords upload={status} />
        </h2>
        <p>{ended ? '' : 'goes on when this page is closed'}</p>
      </header>
      <div className="plate-body upload-progress">
        {!ended && <progress max={100} value={percent} aria-labelledby={barId} />}
        {status.state === 'waiting' && (
          <p>It begins within seconds. If it does not, the worker of Kilnward is not running: the owner sees that on the page Upkeep.</p>
        )}
        {status.error !== null && (
          <p className="field-error">
            <Icon name="warning" />
            <span>{status.error}</span>
          </p>
        )}
        <dl className="facts upload-counts">
          <Count words="New" count={status.added} />
          <Count words="Known already" count={status.repeated} />
          <Count words="Kept, not counted" count={status.marked} />
          <Count words="Not read" count={status.rejected} />
        </dl>
        {(ended || status.rejected > 0) && (
          <div className="upload-acts">
            {status.rejected > 0 && (
              <a className="key" href={`/api/v1/uploads/${uploadId}/errors.csv`} download>
                <Icon name="down" />
                Rows that were not read
              </a>
            )}
            {ended && status.added > 0 && <KeyLink href={`/room?sensor=${status.sensorId}`}>See the room</KeyLink>}
          </div>
        )}
      </div>
    </section>
  )
}

function Count({ words, count }: { words: string; count: number }) {
  return (
    <div>
      <dt>{words}</dt>
      <dd className="num">{countText(count)}</dd>
    </div>
  )
}
