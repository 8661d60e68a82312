'use client'

import Link from 'next/link'
import type { ComponentProps, ReactNode, Ref } from 'react'
import { Icon, type IconName } from '@/app/_components/icons'
import { usePress } from '@/app/_components/use-press'

export type KeySize = 44 | 56 | 64 | 80 | 108
export type KeyTone = 'plain' | 'go' | 'ink' | 'quiet' | 'off' | 'early' | 'alarm'

function keyClasses(size: KeySize, tone: KeyTone, isChoice: boolean, className: string): string {
  return ['key', size === 44 ? '' : `key-${size}`, tone === 'plain' ? '' : `key-${tone}`, isChoice ? 'key-choice' : '', className]
    .filter(Boolean)
    .join(' ')
}

export type KeyProps = {
  children: ReactNode
  onPress?: () => void
  /** Office 44, phone 56, floor 64, sheet action 80, run 108. */
  size?: KeySize
  tone?: KeyTone
  icon?: IconName
  /** Makes the key one of several choices; the chosen one has the heavy edge and a check. */
  isChosen?: boolean
  /** Stands but does nothing; its words say what is missing. */
  isOff?: boolean
  /** 'submit' in a form; there the form's own submit is what acts. */
  type?: 'button' | 'submit'
  /** Milliseconds in which a second tap is ignored. */
  deafMs?: number
  className?: string
  ref?: Ref<HTMLButtonElement>
} & Pick<ComponentProps<'button'>, 'id' | 'aria-label' | 'aria-describedby' | 'aria-expanded' | 'aria-controls' | 'aria-haspopup'>

/** A physical button: solid edge, travels down when pressed, acts when the finger lifts inside it. */
export function Key({
  children,
  onPress,
  size = 44,
  tone = 'plain',
  icon,
  isChosen,
  isOff = false,
  type = 'button',
  deafMs,
  className = '',
  ref,
  ...rest
}: KeyProps) {
  const press = usePress(isOff ? undefined : onPress, deafMs)
  const isChoice = isChosen !== undefined
  // A submit key leaves clicking to the browser, so that Enter and the key do the same thing.
  const handlers = type === 'submit' ? {} : press
  return (
    <button
      {...rest}
      {...handlers}
      ref={ref}
      // eslint-disable-next-line react/button-has-type -- one of the two real types, by prop
      type={type}
      className={keyClasses(size, isOff && tone !== 'off' ? 'off' : tone, isChoice, className)}
      aria-pressed={isChosen}
      aria-disabled={isOff || undefined}
    >
      {icon && <Icon name={icon} />}
      {children}
      {isChosen && <Icon name="check" />}
    </button>
  )
}

export type KeyLinkProps = {
  children: ReactNode
  href: string
  size?: KeySize
  tone?: KeyTone
  icon?: IconName
  className?: string
  isCurrent?: boolean
}

/** A key that goes to another page. */
export function KeyLink({ children, href, size = 44, tone = 'plain', icon, className = '', isCurrent = false }: KeyLinkProps) {
  return (
    <Link className={keyClasses(size, tone, false, className)} href={href} prefetch={false} aria-current={isCurrent ? 'page' : undefined}>
      {icon && <Icon name={icon} />}
      {children}
    </Link>
  )
}
