import { AppError } from '@/lib/core/errors'

/** A refusal that belongs beside one field of a form. @throws {AppError} conflict with `fields`. */
export function refuseField(field: string, reason: string): never {
  throw new AppError('conflict', reason, { fields: [{ path: field, message: reason }] })
}
