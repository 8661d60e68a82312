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
