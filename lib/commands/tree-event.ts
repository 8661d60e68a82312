import type { Actor } from '@/lib/members/actor'
import { TreeEvent } from '@/models'

export type TreeEventKind =
  | 'tree added'
  | 'tree edited'
  | 'recipe moved'
  | 'intake passed'
  | 'coat on'
  | 'coat taken back'
  | 'evidence'
  | 'evidence withdrawn'
  | 'held'
  | 'hold lifted'
  | 'moved'
  | 'looked over'
  | 'released'
  | 'release taken back'
  | 'scrapped'
  | 'notice'

/** Adds a line to a tree's history; `by` null is Kilnward itself. `text` is what a person reads there; the rest is for later use. */
export async function addTreeEvent(
  treeId: string,
  kind: TreeEventKind,
  { by, at, text, ...detail }: { by: Actor | null; at: number; text: string } & Record<string, unknown>,
): Promise<void> {
  await TreeEvent.create({ treeId, kind, memberId: by?.id ?? null, device: by?.device ?? '', at, detail: { text, ...detail } })
}
