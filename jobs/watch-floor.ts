import type { Job } from '@/jobs/job'
import { passNotices } from '@/lib/commands/pass-notices'
import type { Clock } from '@/lib/core/clock'
import { log } from '@/lib/core/log'
import type { Queue } from '@/lib/queue/contract'

/** A jump of the wall clock that no drift explains. */
const JUMP_MS = 90_000

export type WatchFloorParts = {
  /** Null where there is no foundry to look at yet. */
  loadQueue: (options: { clock: Clock }) => Promise<{ queue: Queue } | null>
  vapidPublicKey: string
  /** Milliseconds that only ever grow, to tell a jump of the wall clock from time that has passed. */
  monotonic: () => number
  /** Told before each pass whether sending has to wait for the next one. */
  suspendSending: (isSuspended: boolean) => void
  followedBy: readonly Job[]
}

/** Every minute: looks at the floor, opens and closes notices. */
export function watchFloor({ loadQueue, vapidPublicKey, monotonic, suspendSending, followedBy }: WatchFloorParts): Job {
  let last: { wall: number; steady: number } | null = null
  return {
    name: 'watch-floor',
    schedule: '0 * * * * *',
    followedBy,
    run: async ({ clock }) => {
      const here = { wall: clock.now(), steady: monotonic() }
      const jump = last === null ? 0 : Math.round(here.wall - last.wall - (here.steady - last.steady))
      last = here
      const hasJumped = Math.abs(jump) > JUMP_MS
      // What was right by the old time may be wrong by the new one: look twice before anybody is told.
      suspendSending(hasJumped)
      if (hasJumped) log('clock.jumped', { milliseconds: jump })
      const loaded = await loadQueue({ clock })
      if (!loaded) return { isEmpty: true }
      const pass = await passNotices(loaded.queue, { vapidPublicKey, clock })
      if (pass.opened + pass.closed > 0) log('watch-floor.changed', pass)
      return { ...pass, ...(hasJumped && { clockJumpMs: jump }) }
    },
  }
}
