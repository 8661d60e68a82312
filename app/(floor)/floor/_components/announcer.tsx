'use client'

import { useEffect, useRef, useState } from 'react'
import { floorNews, type FloorNews } from '@/lib/floor/news'
import type { QueueTree } from '@/lib/queue/contract'

/** Says what is new to dip, and once what has become overdue, to those who do not look at the screen. */
export function Announcer({ trees }: { trees: QueueTree[] }) {
  const before = useRef(trees)
  const [news, setNews] = useState<FloorNews>({ polite: '', assertive: '' })
  useEffect(() => {
    if (before.current === trees) return
    const next = floorNews(before.current, trees)
    before.current = trees
    if (next.polite || next.assertive) setNews(next)
  }, [trees])
  return (
    <>
      <p className="vh" aria-live="polite">
        {news.polite}
      </p>
      <p className="vh" role="alert">
        {news.assertive}
      </p>
    </>
  )
}
