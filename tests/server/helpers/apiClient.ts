/** What came back: status, JSON body and headers. */
export interface Reply {
  status: number;
  // Tests read what they expect to find; a wrong guess fails on its own.
  // eslint-disable-next-line @typescript-eslint/no-explicit-any
  body: any;
  headers: Headers;
  text: string;
}

export interface SendOptions {
  headers?: Record<string, string>;
  /** Sent as it is, in place of a JSON body. */
  rawBody?: string;
}

export interface ApiClient {
  get(path: string, options?: SendOptions): Promise<Reply>;
  post(path: string, body?: unknown, options?: SendOptions): Promise<Reply>;
  delete(path: string, options?: SendOptions): Promise<Reply>;
  /** The session cookie as it would be sent, '' for none. Can be put back. */
  cookie: string;
}

/** A browser's part of the API: keeps the cookie and sends the header our pages send. */
export function createApiClient(url: string): ApiClient {
  const client: ApiClient = {
    cookie: '',
    get: (path, options) => send('GET', path, undefined, options),
    post: (path, body, options) => send('POST', path, body, options),
    delete: (path, options) => send('DELETE', path, undefined, options),
  };

  async function send(method: string, path: string, body: unknown, options: SendOptions = {}): Promise<Reply> {
    const content = options.rawBody ?? (body === undefined ? undefined : JSON.stringify(body));
    const headers: Record<string, string> = {
      ...(method === 'GET' ? {} : { 'X-Swaymark': '1' }),
      ...(content === undefined ? {} : { 'Content-Type': 'application/json' }),
      ...(client.cookie && { Cookie: client.cookie }),
      ...options.headers,
    };
    const given = Object.entries(headers).filter(([, text]) => text !== '');
    const response = await fetch(url + path, { method, headers: Object.fromEntries(given), body: content });
    for (const set of response.headers.getSetCookie()) {
      const [pair = ''] = set.split(';');
      client.cookie = pair.endsWith('=') ? '' : pair;
    }
    const text = await response.text();
    const isJson = response.headers.get('Content-Type')?.startsWith('application/json');
    return { status: response.status, body: isJson ? JSON.parse(text) : undefined, headers: response.headers, text };
  }

  return client;
}
