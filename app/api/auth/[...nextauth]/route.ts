import NextAuth from 'next-auth'
import type { NextRequest } from 'next/server'
import { AppError } from '@/lib/core/errors'
import { authOptions } from '@/lib/server/auth'
import { requireOwnOrigin } from '@/lib/server/origin'
import { problemOf } from '@/lib/server/problem'

type Context = { params: Promise<{ nextauth: string[] }> }

const nextAuth: (request: NextRequest, context: Context) => Promise<Response> = NextAuth(authOptions)

export async function GET(request: NextRequest, context: Context): Promise<Response> {
  try {
    requireWayBack(request)
    return await nextAuth(request, context)
  } catch (error) {
    return problemOf(error, request)
  }
}

export async function POST(request: NextRequest, context: Context): Promise<Response> {
  try {
    requireOwnOrigin(request)
    requireWayBack(request)
    // next-auth's own browser code reports here whatever it likes; the log is not for strangers to fill.
    if ((await context.params).nextauth[0] === '_log') return new Response(null, { status: 204 })
    return await nextAuth(request, context)
  } catch (error) {
    return problemOf(error, request)
  }
}

/** next-auth takes an address to come back to that is none for a fault of the server, and answers 500. */
function requireWayBack({ nextUrl, cookies }: NextRequest): void {
  const cookie = cookies.getAll().find(({ name }) => name.endsWith('next-auth.callback-url'))
  for (const address of [nextUrl.searchParams.get('callbackUrl'), cookie?.value]) {
    if (!address) continue
    const base = address.startsWith('/') ? nextUrl.origin : undefined
    const isWayBack = URL.canParse(address, base) && /^https?:$/.test(new URL(address, base).protocol)
    if (!isWayBack) throw new AppError('malformed', 'The address to come back to is none.')
  }
}
