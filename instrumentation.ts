/** Runs once before the server answers: it would start and fail each request without a secret otherwise. */
export async function register(): Promise<void> {
  if (process.env.NEXT_RUNTIME !== 'nodejs') return
  const { startWeb } = await import('@/lib/server/start-web')
  await startWeb()
}
