'use client'

import { useRef, useState } from 'react'
import { Key } from '@/app/_components/key'

/** Lines to copy. Where the browser keeps the clipboard to itself (plain http), the key marks them instead. */
export function CodeBlock({ label, code }: { label: string; code: string }) {
  const block = useRef<HTMLPreElement>(null)
  const [said, setSaid] = useState('')
  const copy = async () => {
    if (block.current) window.getSelection()?.selectAllChildren(block.current)
    const isCopied = await copyText(code)
    setSaid(isCopied ? 'Copied' : 'Marked: copy it with Ctrl-C')
  }
  return (
    <div className="code-block">
      <div>
        <b>{label}</b>
        <span aria-live="polite">{said}</span>
        <Key onPress={() => void copy()} aria-label={`Copy: ${label}`}>
          Copy
        </Key>
      </div>
      {/* Scrolls by itself, so it can be reached by the keyboard. */}
      {/* oxlint-disable-next-line jsx-a11y/no-noninteractive-tabindex */}
      <pre ref={block} tabIndex={0} aria-label={label}>
        {code}
      </pre>
    </div>
  )
}

/** Whether the browser took it: it keeps the clipboard to itself on plain http, and may refuse elsewhere. */
async function copyText(text: string): Promise<boolean> {
  try {
    await navigator.clipboard.writeText(text)
    return true
  } catch {
    return false
  }
}
