import { setTimeout as pause } from 'node:timers/promises'
import { backUp } from '@/jobs/back-up'
import { bringToOffsets } from '@/jobs/correct-readings'
import { demoFeed } from '@/jobs/demo-feed'
import type { Job } from '@/jobs/job'
import { prune } from '@/jobs/prune'
import { sendPushes } from '@/jobs/send-pushes'
import { watchFloor } from '@/jobs/watch-floor'
import type { Clock } from '@/lib/core/clock'
import { hasFoundry } from '@/lib/queries/has-foundry'
import { loadQueue } from '@/lib/queries/queue'
import { webPushSender } from '@/lib/server/push-sender'

export type RegistryParts = {
  clock: Clock
  vapidPublicKey: string
  monotonic: () => number
  random: () => number
}

/** Every job of the worker. A new one goes here. */
export function allJobs({ clock, vapidPublicKey, monotonic, random }: RegistryParts): Job[] {
  let isSuspended = false
  const send = sendPushes({ sender: webPushSender({ clock }), random, isSuspended: () => isSuspended })
  const watch = watchFloor({
    loadQueue: async (options) => ((await hasFoundry()) ? loadQueue(options) : null),
    vapidPublicKey,
    monotonic,
    suspendSending: (value) => {
      isSuspended = value
    },
    followedBy: [send],
  })
  return [watch, send, prune, backUp, bringToOffsets({ pause }), demoFeed({ fetch })]
}
