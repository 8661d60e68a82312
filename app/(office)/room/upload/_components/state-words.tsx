import { Icon } from '@/app/_components/icons'
import type { UploadState } from '@/lib/uploads/upload-state'

const WORDS: Record<UploadState, string> = {
  draft: 'Not read yet: say how',
  waiting: 'Waits for the worker',
  running: 'Being read',
  done: 'Read',
  failed: 'Given up',
  cancelled: 'Stopped',
}

/** How an upload stands, in words and with a mark. */
export function StateWords({
  upload: { state, bytesDone, sizeBytes },
}: {
  upload: { state: UploadState; bytesDone: number; sizeBytes: number }
}) {
  if (state === 'running') return <>{`${WORDS.running}, ${Math.floor((100 * bytesDone) / Math.max(1, sizeBytes))}\u00A0%`}</>
  if (state === 'done') {
    return (
      <span className="state-verdigris">
        <Icon name="check" /> {WORDS.done}
      </span>
    )
  }
  if (state !== 'failed') return <>{WORDS[state]}</>
  return (
    <span className="state-furnace">
      <Icon name="warning" /> {WORDS.failed}
    </span>
  )
}
