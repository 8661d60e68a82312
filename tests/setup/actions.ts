import { builtActions } from '@/tests/setup/build'
import type { Client } from '@/tests/setup/client'

export type ActionAnswer = {
  status: number
  /** Where the action leads to; null when it leads nowhere. */
  redirect: string | null
  /** What it gave back, as React writes it. */
  text: string
}

const BOUNDARY = 'kilnward-action-boundary'
const part = (name: string, value: string) => `--${BOUNDARY}\r\ncontent-disposition: form-data; name="${name}"\r\n\r\n${value}\r\n`

/**
 * Calls a server action as the browser does.
 *
 * @param args what comes before the form, or all there is.
 * @param fields the form; left out for an action that takes none.
 */
export async function callAction(
  client: Client,
  path: string,
  name: string,
  args: readonly (string | number)[],
  fields?: Record<string, string>,
): Promise<ActionAnswer> {
  const action = builtActions().find((candidate) => candidate.name === name)
  if (!action) throw new Error(`There is no action ${name} in the build.`)
  const all = fields ? [...args, { status: 'idle' }, '$K1'] : args
  const form = Object.entries(fields ?? {}).map(([field, value]) => part(`_1_${field}`, value))
  const response = await client.fetch(path, {
    method: 'POST',
    headers: { 'next-action': action.id, 'content-type': `multipart/form-data; boundary=${BOUNDARY}` },
    body: `${form.join('')}${part('0', JSON.stringify(all))}--${BOUNDARY}--\r\n`,
  })
  const [redirect = null] = response.headers.get('x-action-redirect')?.split(';') ?? []
  return { status: response.status, redirect, text: await response.text() }
}
