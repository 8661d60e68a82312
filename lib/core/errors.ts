/** Stable, machine-readable reasons. lib/server/problem.ts maps each to one status; nothing else may. */
export type ErrorCode =
  | 'not_found'
  | 'forbidden'
  | 'unauthenticated'
  /** Not even JSON. */
  | 'malformed'
  | 'invalid_input'
  | 'conflict'
  | 'unprocessable'
  | 'too_large'
  | 'unsupported_media_type'
  | 'too_many_requests'
  | 'unavailable'

/** An expected refusal. `message` is a plain sentence for a person; `extra` becomes members of the problem document. */
export class AppError extends Error {
  override readonly name = 'AppError'
  constructor(
    readonly code: ErrorCode,
    message: string,
    readonly extra: Readonly<Record<string, unknown>> = {},
    options?: { cause?: unknown },
  ) {
    super(message, options)
  }
}

/** The refusal of everything that needs a foundry before there is one. */
export const notSetUp = (): AppError =>
  new AppError('unavailable', 'Kilnward is not set up yet. Open it in a browser to make the owner’s account.')

/**
 * What went wrong, in one line for a log. Sequelize words whatever constraint SQLite names as 'Validation error' and keeps the
 * sentence that tells which one on `parent`; there are no values in it.
 *
 * @example reasonOf(error) // => 'SequelizeUniqueConstraintError: Validation error (SQLITE_CONSTRAINT: UNIQUE constraint failed: trees.tag)'
 */
export function reasonOf(error: unknown): string {
  if (error instanceof AppError) return error.message
  if (!(error instanceof Error)) return String(error)
  const cause = 'parent' in error && error.parent instanceof Error && !error.message.includes(error.parent.message) ? error.parent : null
  return `${error.name}: ${error.message}${cause ? ` (${cause.message})` : ''}`
}

/** The same with where it went wrong. */
export function traceOf(error: unknown): string {
  const frames = error instanceof Error ? (error.stack ?? '').split('\n').filter((line) => /^\s+at /.test(line)) : []
  return [reasonOf(error), ...frames].join('\n')
}
