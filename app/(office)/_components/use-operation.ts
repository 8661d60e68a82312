'use client'

import { useMutation } from '@tanstack/react-query'
import { useRouter } from 'next/navigation'
import { useRef } from 'react'
import { z } from 'zod'

const problemDocument = z.object({ detail: z.string() })

/** A refusal that the server put in words. */
class Refusal extends Error {
  override readonly name = 'Refusal'
}

/** A UUID that also works on plain LAN http, where browsers keep `crypto.randomUUID` to themselves. */
export function newOperationId(): string {
  const bytes = crypto.getRandomValues(new Uint8Array(16))
  bytes[6] = (bytes[6]! & 0x0f) | 0x40
  bytes[8] = (bytes[8]! & 0x3f) | 0x80
  const hex = Array.from(bytes, (byte) => byte.toString(16).padStart(2, '0')).join('')
  return `${hex.slice(0, 8)}-${hex.slice(8, 12)}-${hex.slice(12, 16)}-${hex.slice(16, 20)}-${hex.slice(20)}`
}

/**
 * One write through the HTTP API under an operation id. The id belongs to what is asked, not to the press: after a failed
 * send the same press sends the same id, so that nothing is written twice.
 */
// oxlint-disable-next-line typescript/no-unnecessary-type-parameters -- says what the door at this path answers
export function useOperation<Answer = unknown>(
  path: string,
): {
  send: (body: Record<string, unknown>) => void
  isPending: boolean
  isDone: boolean
  /** What the server answered to the last one that was kept; null before. */
  answer: Answer | null
  problem: string | null
} {
  const router = useRouter()
  const kept = useRef<{ body: string; operationId: string } | null>(null)
  const mutation = useMutation({
    mutationFn: async (body: Record<string, unknown>): Promise<Answer> => {
      const text = JSON.stringify(body)
      if (kept.current?.body !== text) kept.current = { body: text, operationId: newOperationId() }
      const response = await fetch(path, {
        method: 'POST',
        headers: { 'content-type': 'application/json' },
        body: JSON.stringify({ operationId: kept.current.operationId, ...body }),
      })
      // An answer of any kind settles the operation; only silence keeps its id.
      if (response.status < 500) kept.current = null
      // oxlint-disable-next-line typescript/no-unsafe-type-assertion -- our own door, whose answers are held against its contract in the tests
      if (response.ok) return (await response.json()) as Answer
      const document = problemDocument.safeParse(await response.json().catch(() => null))
      throw new Refusal(document.success ? document.data.detail : 'Not saved: the server could not finish this. Try again.')
    },
    onSuccess: () => router.refresh(),
  })
  const { error } = mutation
  return {
    send: (body) => {
      if (!mutation.isPending) mutation.mutate(body)
    },
    isPending: mutation.isPending,
    isDone: mutation.isSuccess,
    answer: mutation.data ?? null,
    problem: error === null ? null : error instanceof Refusal ? error.message : 'Not saved: no answer from the server. Try again.',
  }
}
