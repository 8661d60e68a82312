// Copied into the product that is measured, as /api/empty: what the framework itself costs, and nothing else.
export const dynamic = 'force-dynamic'

export function GET(): Response {
  return Response.json({})
}
