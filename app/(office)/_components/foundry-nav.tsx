'use client'

import Link from 'next/link'
import { usePathname } from 'next/navigation'
import { currentPage, FOUNDRY_PAGES, pagesFor } from '@/lib/members/office-pages'
import type { Role } from '@/lib/members/roles'

/** The pages behind the tab 'Foundry' that this member may open. Stands at the top of each of them. */
export function FoundryNav({ role }: { role: Role }) {
  const current = currentPage(usePathname(), FOUNDRY_PAGES)
  return (
    <nav className="foundry-nav" aria-label="The foundry">
      {pagesFor(role, FOUNDRY_PAGES).map(({ href, word }) => (
        <Link key={href} className="group-link" href={href} prefetch={false} aria-current={href === current?.href ? 'page' : undefined}>
          {word}
        </Link>
      ))}
    </nav>
  )
}
