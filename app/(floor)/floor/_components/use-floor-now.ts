'use client'

import { useEffect, useState } from 'react'

const TICK_MS = 1000
/** Minutes are what the floor shows; a finer step would only redraw it. */
const STEP_MS = 5000

/** The server's present, stepping every five seconds. Starts with the server's own, so that the first frame agrees with it. */
export function useFloorNow(serverNow: number, clockGap: number): number {
  const [now, setNow] = useState(serverNow)
  useEffect(() => {
    const tick = () => setNow(Math.floor((Date.now() + clockGap) / STEP_MS) * STEP_MS)
    tick()
    const timer = setInterval(tick, TICK_MS)
    return () => clearInterval(timer)
  }, [clockGap])
  return now
}
