// Stand-in until the real commands land on this branch's base. Not part of the product.
import { AppError } from '@/lib/core/errors'
import { stubScene } from '@/lib/queries/office-stub'

export function refuseStub(): void {
  if (stubScene() === 'refuse') throw new AppError('conflict', 'Somebody else changed this tree a moment ago: look at it again.')
}
