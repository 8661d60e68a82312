'use client'

import { useRouter } from 'next/navigation'
import { useEffect } from 'react'

const MINUTE_MS = 60_000

/** Reads the page anew once a minute while somebody can see it, and when they come back to it. What is typed stays typed. */
export function KeepFresh() {
  const router = useRouter()
  useEffect(() => {
    const refresh = () => {
      if (document.visibilityState === 'visible') router.refresh()
    }
    const timer = setInterval(refresh, MINUTE_MS)
    document.addEventListener('visibilitychange', refresh)
    return () => {
      clearInterval(timer)
      document.removeEventListener('visibilitychange', refresh)
    }
  }, [router])
  return null
}
