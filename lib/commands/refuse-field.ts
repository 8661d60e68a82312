import { AppError } from '@/lib/core/errors'

/** A refusal that belongs beside one field of the form. */
export function refuseField(field: string, reason: string): never {
  throw new AppError('conflict', reason, { fields: [{ path: field, message: reason }] })
}
