import { env } from '@/lib/core/env'
import { openRoute } from '@/lib/server/api'
import { DESCRIBED_DOORS } from '@/lib/server/doors/all'
import { openApiDocument } from '@/lib/server/open-api'

/** The description of every door, for programs and for those who write them. */
export const GET = openRoute(() =>
  Promise.resolve(Response.json(openApiDocument(DESCRIBED_DOORS, { address: new URL(env().NEXTAUTH_URL).origin }))),
)
