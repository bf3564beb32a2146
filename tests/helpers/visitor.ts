/** Somebody at a built server over HTTP: keeps the cookie that it was given and nothing else, as a browser would. */
export class Visitor {
  private cookies = new Map<string, string>()

  constructor(readonly baseURL: string) {}

  /** A copy that goes its own way from here, with the same cookie. */
  twin(): Visitor {
    const twin = new Visitor(this.baseURL)
    twin.cookies = new Map(this.cookies)
    return twin
  }

  /** What must never be written anywhere: session cookies, not the one that names a language. */
  secrets(): string[] {
    return [...this.cookies.values()].filter(value => value.length > 20)
  }

  async send(method: string, path: string, body?: unknown, headers: Record<string, string> = {}): Promise<Answer> {
    const raw = body === undefined || typeof body === 'string' || body instanceof Uint8Array
    const response = await fetch(`${this.baseURL}${path}`, {
      method,
      redirect: 'manual',
      headers: { ...(body === undefined ? {} : { 'content-type': 'application/json' }), cookie: [...this.cookies].map(([name, value]) => `${name}=${value}`).join('; '), ...headers },
      body: raw ? body as BodyInit | undefined : JSON.stringify(body),
    })
    for (const cookie of response.headers.getSetCookie()) {
      const [, name, value] = /^([^=]+)=([^;]*)/.exec(cookie)!
      if (value) this.cookies.set(name!, value)
      else this.cookies.delete(name!)
    }
    const bytes = Buffer.from(await response.arrayBuffer())
    const type = response.headers.get('content-type') ?? ''
    return { status: response.status, type, headers: response.headers, bytes, json: /json/.test(type) && bytes.length > 0 ? JSON.parse(bytes.toString('utf8')) : undefined }
  }

  async signIn(email: string, password: string): Promise<Answer> {
    return this.send('POST', '/api/account/sign-in', { email, password })
  }
}

export interface Answer {
  status: number
  type: string
  headers: Headers
  bytes: Buffer
  /** The body where it is JSON. */
  // eslint-disable-next-line @typescript-eslint/no-explicit-any -- tests read what came
  json: any
}
