import NextAuth from 'next-auth'
import type { NextRequest } from 'next/server'
import { authOptions } from '@/lib/server/auth'
import { requireOwnOrigin } from '@/lib/server/origin'
import { problemOf } from '@/lib/server/problem'

type Context = { params: Promise<{ nextauth: string[] }> }

const nextAuth: (request: NextRequest, context: Context) => Promise<Response> = NextAuth(authOptions)

export const GET = nextAuth

export async function POST(request: NextRequest, context: Context): Promise<Response> {
  try {
    requireOwnOrigin(request)
    // next-auth's own browser code reports here whatever it likes; the log is not for strangers to fill.
    if ((await context.params).nextauth[0] === '_log') return new Response(null, { status: 204 })
    return await nextAuth(request, context)
  } catch (error) {
    return problemOf(error, request)
  }
}
