import { AppError } from '@/lib/core/errors'
import { Tree } from '@/models'

/**
 * The tree, if it is still on the floor.
 *
 * @throws {AppError} not_found, or conflict when it was released or scrapped.
 */
export async function openTree(treeId: string): Promise<Tree> {
  const tree = await Tree.findByPk(treeId)
  if (!tree) throw new AppError('not_found', 'There is no such tree.')
  if (tree.releasedAt !== null) throw new AppError('conflict', `${tree.tag} was released to burnout and has left the floor.`)
  if (tree.scrappedAt !== null) throw new AppError('conflict', `${tree.tag} was scrapped.`)
  return tree
}
