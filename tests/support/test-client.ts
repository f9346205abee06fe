// biome-ignore lint/suspicious/noExplicitAny: a test says by its expectations what an answer holds
type Json = any;

/** An answer as a test sees it. */
export interface Answered<T = Json> {
  status: number;
  /** Parsed JSON, or the text where it is none. */
  body: T;
  headers: Headers;
}

export interface RequestOptions {
  body?: unknown;
  headers?: Record<string, string>;
  /** Sends this text as it is, instead of `body` as JSON. */
  raw?: string | Uint8Array<ArrayBuffer>;
}

/** A browser of one person: keeps the session cookie and names our origin, as a page of ours would. */
export class TestClient {
  cookie: string | null = null;
  readonly #url: string;
  readonly #headers: Record<string, string>;

  constructor(url: string, headers: Record<string, string> = {}) {
    this.#url = url;
    this.#headers = { Origin: url, ...headers };
  }

  get = <T = Json>(path: string, options?: RequestOptions) => this.send<T>('GET', path, options);
  post = <T = Json>(path: string, body?: unknown, options?: RequestOptions) =>
    this.send<T>('POST', path, { body, ...options });
  put = <T = Json>(path: string, body?: unknown, options?: RequestOptions) =>
    this.send<T>('PUT', path, { body, ...options });
  /** `version` goes into `If-Match`. */
  patch = <T = Json>(path: string, version: number | null, body?: unknown, options?: RequestOptions) =>
    this.send<T>('PATCH', path, {
      body,
      ...options,
      headers: { ...(version === null ? {} : { 'If-Match': `"${version}"` }), ...options?.headers },
    });
  delete = <T = Json>(path: string, options?: RequestOptions) => this.send<T>('DELETE', path, options);

  async send<T>(method: string, path: string, { body, raw, headers = {} }: RequestOptions = {}): Promise<Answered<T>> {
    const sent = raw ?? (body === undefined ? undefined : JSON.stringify(body));
    const response = await fetch(`${this.#url}${path.startsWith('/api') ? '' : '/api/v1'}${path}`, {
      method,
      redirect: 'manual',
      headers: {
        ...this.#headers,
        ...(this.cookie ? { Cookie: this.cookie } : {}),
        ...(sent === undefined ? {} : { 'Content-Type': 'application/json' }),
        ...headers,
      },
      ...(sent === undefined ? {} : { body: sent }),
    });
    const setCookie = response.headers.getSetCookie().find((cookie) => cookie.includes('tarewright='));
    if (setCookie) this.cookie = String(setCookie.split(';')[0]);
    const text = await response.text();
    const isJson = /json/.test(response.headers.get('content-type') ?? '');
    return { status: response.status, body: (isJson ? JSON.parse(text) : text) as T, headers: response.headers };
  }
}
