'use client'

import { useQuery, useQueryClient, type QueryClient } from '@tanstack/react-query'
import type { Queue } from '@/lib/queue/contract'
import { isQueue } from './shapes'

const floorQueueKey = ['queue'] as const

const POLL_MS = 3000
const ANSWER_WITHIN_MS = 8000

/** A seen queue. `clockGap` is the server's clock minus this tablet's, ms. */
export type SeenQueue = { etag: string; queue: Queue; clockGap: number }

/** Thrown by the poll when the session has ended. */
class SignedOut extends Error {
  override readonly name = 'SignedOut'
}

function gapOf(response: Response, before: number): number {
  // Date has whole seconds: its middle is the best guess.
  const date = Date.parse(response.headers.get('date') ?? '')
  if (Number.isNaN(date)) return before
  const gap = date + 500 - Date.now()
  // A change under two seconds is the rounding of the header.
  return Math.abs(gap - before) < 2000 ? before : gap
}

async function fetchQueue(client: QueryClient, signal: AbortSignal): Promise<SeenQueue> {
  const known = client.getQueryData<SeenQueue>(floorQueueKey)
  const response = await fetch('/api/v1/queue', {
    headers: { accept: 'application/json', ...(known ? { 'if-none-match': known.etag } : {}) },
    cache: 'no-store',
    signal: AbortSignal.any([signal, AbortSignal.timeout(ANSWER_WITHIN_MS)]),
  })
  const clockGap = gapOf(response, known?.clockGap ?? 0)
  if (response.status === 304 && known) return known.clockGap === clockGap ? known : { ...known, clockGap }
  if (response.status === 401) throw new SignedOut('The session has ended.')
  if (!response.ok) throw new Error(`The queue was not given: ${response.status}.`)
  const queue: unknown = await response.json()
  if (!isQueue(queue)) throw new Error('The answer of the server was not understood.')
  return { etag: response.headers.get('etag') ?? '', queue, clockGap }
}

export type FloorQueue = SeenQueue & {
  isConnected: boolean
  isSignedOut: boolean
  /** When the server last answered, by this tablet's clock. */
  answeredAt: number
  refresh: () => Promise<void>
}

/** The queue, asked for every three seconds; while the server is away the last known one stays, with its age. */
export function useFloorQueue(initial: { etag: string; queue: Queue; serverNow: number }): FloorQueue {
  const client = useQueryClient()
  const query = useQuery<SeenQueue>({
    queryKey: floorQueueKey,
    queryFn: ({ signal }) => fetchQueue(client, signal),
    initialData: () => ({ etag: initial.etag, queue: initial.queue, clockGap: initial.serverNow - Date.now() }),
    refetchInterval: POLL_MS,
    refetchIntervalInBackground: true,
    // Each answer is made of new objects; equal parts keep their identity, so that only what changed is drawn anew.
    structuralSharing: true,
    retry: false,
    staleTime: 0,
  })
  return {
    ...query.data,
    isConnected: !query.isError,
    isSignedOut: query.error instanceof SignedOut,
    answeredAt: query.dataUpdatedAt,
    refresh: () => client.invalidateQueries({ queryKey: floorQueueKey }),
  }
}
