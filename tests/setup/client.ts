/** A browser without a window: keeps cookies, sends the site's own Origin, follows no redirects. */
export type Client = {
  baseUrl: string
  cookies: Map<string, string>
  fetch: (path: string, init?: { method?: string; headers?: Record<string, string>; body?: string }) => Promise<Response>
  /** Sends a JSON body. */
  send: (method: string, path: string, body: unknown) => Promise<Response>
}

export function newClient(baseUrl: string, cookies = new Map<string, string>()): Client {
  const request: Client['fetch'] = async (path, init = {}) => {
    const cookie = [...cookies].map(([name, value]) => `${name}=${value}`).join('; ')
    const headers = { origin: baseUrl, ...(cookie ? { cookie } : {}), ...init.headers }
    const response = await fetch(`${baseUrl}${path}`, { redirect: 'manual', ...init, headers })
    for (const line of response.headers.getSetCookie()) {
      const [, name = '', value = ''] = /^([^=]+)=([^;]*)/.exec(line) ?? []
      if (value === '' || /max-age=0|expires=thu, 01 jan 1970/i.test(line)) cookies.delete(name)
      else cookies.set(name, value)
    }
    return response
  }
  return {
    baseUrl,
    cookies,
    fetch: request,
    send: (method, path, body) => request(path, { method, headers: { 'content-type': 'application/json' }, body: JSON.stringify(body) }),
  }
}

async function csrfToken(client: Client): Promise<string> {
  const body: unknown = await (await client.fetch('/api/auth/csrf')).json()
  return body !== null && typeof body === 'object' && 'csrfToken' in body ? String(body.csrfToken) : ''
}

/** Posts a form to next-auth as its browser code does, with the token that belongs to it. */
async function postAuth(client: Client, path: string, fields: Record<string, string>): Promise<Response> {
  const body = new URLSearchParams({ ...fields, csrfToken: await csrfToken(client), json: 'true' })
  return client.fetch(path, { method: 'POST', headers: { 'content-type': 'application/x-www-form-urlencoded' }, body: body.toString() })
}

/** One try at the door. `error` is what the sign-in page gets to see; null after a success. */
export async function trySignIn(
  client: Client,
  email: string,
  password: string,
): Promise<{ status: number; error: string | null; setCookies: string[] }> {
  const response = await postAuth(client, '/api/auth/callback/credentials', { email, password, callbackUrl: '/floor' })
  const body: unknown = await response.json()
  const url = body !== null && typeof body === 'object' && 'url' in body ? String(body.url) : client.baseUrl
  return { status: response.status, error: new URL(url).searchParams.get('error'), setCookies: response.headers.getSetCookie() }
}

/** A client of the member, signed in. */
export async function signIn(baseUrl: string, email: string, password: string): Promise<Client> {
  const client = newClient(baseUrl)
  const { status, error } = await trySignIn(client, email, password)
  if (status !== 200) throw new Error(`${email} could not sign in: ${status} ${error}`)
  return client
}

export const signOut = (client: Client): Promise<Response> => postAuth(client, '/api/auth/signout', { callbackUrl: '/' })
