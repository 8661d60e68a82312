import type { Metadata, Viewport } from 'next'
import localFont from 'next/font/local'
import { cookies } from 'next/headers'
import type { ReactNode } from 'react'
import { QueryProvider } from '@/app/_providers/query-provider'
import { parseTheme, THEME_COOKIE } from '@/lib/core/theme'
import './globals.css'

const textFace = localFont({
  src: '../fonts/atkinson-hyperlegible-next-latin-wght-normal.woff2',
  weight: '200 800',
  variable: '--font-text',
  display: 'swap',
})

const tagFace = localFont({
  src: [
    { path: '../fonts/barlow-condensed-latin-500-normal.woff2', weight: '500' },
    { path: '../fonts/barlow-condensed-latin-600-normal.woff2', weight: '600' },
    { path: '../fonts/barlow-condensed-latin-700-normal.woff2', weight: '700' },
  ],
  variable: '--font-tag',
  display: 'swap',
  // The stand-in while it loads is condensed too, else rows would jump.
  fallback: ['Arial Narrow', 'sans-serif'],
  adjustFontFallback: false,
})

export const metadata: Metadata = {
  title: { default: 'Kilnward', template: '%s · Kilnward' },
  description: 'Shell room log: which tree to dip now, which bath, which is next.',
  applicationName: 'Kilnward',
  icons: {
    icon: [
      { url: '/icons/icon.svg', type: 'image/svg+xml' },
      { url: '/icons/icon-192.png', sizes: '192x192', type: 'image/png' },
    ],
    apple: '/icons/icon-192.png',
  },
  appleWebApp: { capable: true, title: 'Kilnward', statusBarStyle: 'black' },
  formatDetection: { telephone: false, date: false, address: false, email: false },
  robots: { index: false, follow: false },
}

export const viewport: Viewport = {
  width: 'device-width',
  initialScale: 1,
  themeColor: [
    { media: '(prefers-color-scheme: light)', color: '#1F1B16' },
    { media: '(prefers-color-scheme: dark)', color: '#0E0C0A' },
  ],
}

/** Reading the cookie also keeps every page dynamic, which a nonce in the content policy needs. */
export default async function RootLayout({ children }: { children: ReactNode }) {
  const theme = parseTheme((await cookies()).get(THEME_COOKIE)?.value)
  return (
    <html lang="en" data-theme={theme} className={`${textFace.variable} ${tagFace.variable}`} suppressHydrationWarning>
      <body>
        <QueryProvider>{children}</QueryProvider>
      </body>
    </html>
  )
}
