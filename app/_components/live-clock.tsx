'use client'

import { useEffect, useState } from 'react'
import { formatClock, formatDate } from '@/lib/format/local-time'

/**
 * Server time that goes on running in the browser. The tablet's own clock may be wrong by hours; the gap to the server's is
 * taken once and kept, so that every screen shows the time by which dips are logged.
 */
export function useServerNow(serverNow: number, everyMs = 1000): number {
  const [now, setNow] = useState(serverNow)
  useEffect(() => {
    const gap = serverNow - Date.now()
    const tick = () => setNow(Date.now() + gap)
    tick()
    const timer = setInterval(tick, everyMs)
    return () => clearInterval(timer)
  }, [serverNow, everyMs])
  return now
}

/** 'Tue 13 Oct 15:10' in the foundry's zone. */
export function LiveClock({ serverNow, timeZone, className = '' }: { serverNow: number; timeZone: string; className?: string }) {
  const now = useServerNow(serverNow)
  return (
    <time className={`num whitespace-nowrap ${className}`} dateTime={new Date(now).toISOString()}>
      {formatDate(now, timeZone)} {formatClock(now, timeZone)}
    </time>
  )
}
