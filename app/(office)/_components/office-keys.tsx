'use client'

import { useRouter } from 'next/navigation'
import { useEffect, useRef } from 'react'
import { Key } from '@/app/_components/key'
import { mayOpen, OFFICE_KEYS, pageOfKey } from '@/lib/members/office-keys'
import type { Role } from '@/lib/members/roles'

/** How long after `g` the letter of a page is waited for. */
const GO_MS = 1500

const isTyping = (target: EventTarget | null) =>
  target instanceof HTMLElement && (target.isContentEditable || ['INPUT', 'TEXTAREA', 'SELECT'].includes(target.tagName))

/** The nearest list's links, in order; its body carries `data-rows`. */
const rowLinks = () => [...document.querySelectorAll<HTMLAnchorElement>('[data-rows] a.row-link')]

/** Moves along the rows; from the first upwards back to the field that finds. False where there is nothing to move to. */
function moveAlongRows(step: 1 | -1): boolean {
  const links = rowLinks()
  const at = links.findIndex((link) => link === document.activeElement)
  const find = document.querySelector<HTMLInputElement>('[data-find]')
  if (at === -1 && document.activeElement !== document.body && document.activeElement !== find) return false
  if (step === -1 && at <= 0) {
    if (at === 0) find?.focus()
    return at === 0 && find !== null
  }
  const next = links[at + step]
  next?.focus()
  next?.scrollIntoView({ block: 'nearest' })
  return next !== undefined
}

/** The keyboard of the office. It finds, goes and opens; no key of it logs or changes anything. */
export function OfficeKeys({ role }: { role: Role }) {
  const router = useRouter()
  const help = useRef<HTMLDialogElement>(null)
  useEffect(() => {
    let wentAt = 0
    const onKey = (event: KeyboardEvent) => {
      if (event.defaultPrevented || event.ctrlKey || event.metaKey || event.altKey || document.querySelector('dialog[open]')) return
      const typing = isTyping(event.target)
      const isFind = event.target instanceof HTMLElement && event.target.matches('[data-find]')
      if (event.key === 'Escape' && typing && event.target instanceof HTMLElement) return event.target.blur()
      if (event.key === 'ArrowDown' || event.key === 'ArrowUp') {
        if (typing && !isFind) return
        if (moveAlongRows(event.key === 'ArrowDown' ? 1 : -1)) event.preventDefault()
        return
      }
      if (typing) return
      const isGoing = event.timeStamp - wentAt < GO_MS
      wentAt = 0
      const page = isGoing ? pageOfKey(event.key, role) : null
      if (page !== null) router.push(page)
      else if (event.key === 'g') wentAt = event.timeStamp
      else if (event.key === '?') help.current?.showModal()
      else if (event.key === '/') {
        event.preventDefault()
        const find = document.querySelector<HTMLInputElement>('[data-find]')
        if (find) find.select()
        else router.push('/trees#find-tree')
      }
    }
    document.addEventListener('keydown', onKey)
    return () => document.removeEventListener('keydown', onKey)
  }, [router, role])
  return (
    <dialog ref={help} className="keys-help" aria-labelledby="keys-help-title">
      <h2 id="keys-help-title">Keys of the office</h2>
      <dl>
        {OFFICE_KEYS.filter(({ page }) => page === undefined || mayOpen(page, role)).map(({ keys, does }) => (
          <div key={does}>
            <dt>
              {keys.map((key) => (
                <kbd key={key}>{key}</kbd>
              ))}
            </dt>
            <dd>{does}</dd>
          </div>
        ))}
      </dl>
      <p className="text-15 text-soot">No key logs or changes anything on its own.</p>
      <Key onPress={() => help.current?.close()}>Close</Key>
    </dialog>
  )
}
