'use client'

import Link from 'next/link'
import { usePathname } from 'next/navigation'
import './demo-mark.css'
import { signOutHere } from '@/app/_components/sign-out'
import { Key } from '@/app/_components/key'
import { LiveClock } from '@/app/_components/live-clock'
import { ThemeKey } from '@/app/_components/theme-switch'
import { Wordmark } from '@/app/_components/wordmark'
import { currentPage, FOUNDRY_PAGES, OFFICE_TABS, pagesFor } from '@/lib/members/office-pages'
import type { Role } from '@/lib/members/roles'

export type OfficeBarProps = {
  foundryName: string
  /** Demo data is laid over this foundry. */
  hasDemoData: boolean
  timeZone: string
  member: { name: string; role: Role }
  /** Server time at which the page was made, epoch ms. */
  serverNow: number
}

/** Frame of the office pages: the tabs, whose page it is, the time, and the way out. */
export function OfficeBar({ foundryName, hasDemoData, timeZone, member, serverNow }: OfficeBarProps) {
  const path = usePathname()
  const current = currentPage(path, FOUNDRY_PAGES) ? '/settings' : currentPage(path, OFFICE_TABS)?.href
  return (
    <div className="office-bar">
      <Link className="flex items-center" href="/floor" aria-label="Kilnward, to the floor">
        <Wordmark height={36} />
      </Link>
      <nav aria-label="Pages">
        {pagesFor(member.role, OFFICE_TABS).map(({ href, word }) => (
          <Link key={href} href={href} prefetch={false} aria-current={href === current ? 'page' : undefined}>
            {word}
          </Link>
        ))}
      </nav>
      <div className="who">
        <span>{foundryName}</span>
        {hasDemoData && <span className="demo-mark">Demo data</span>}
        <Link className="underline underline-offset-4" href="/me" prefetch={false}>
          <b className="text-ink">{member.name}</b>, {member.role}
        </Link>
        <LiveClock className="text-20 text-ink" serverNow={serverNow} timeZone={timeZone} />
        <ThemeKey />
        <Key tone="quiet" className="px-3" onPress={() => void signOutHere()}>
          Sign out
        </Key>
      </div>
    </div>
  )
}
