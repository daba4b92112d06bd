/** An answer with its body read: parsed when it is JSON, text otherwise. */
export interface Answer {
  readonly status: number;
  readonly headers: Headers;
  readonly body: unknown;
  readonly text: string;
}

interface RequestOptions {
  readonly body?: unknown;
  readonly form?: FormData;
  readonly headers?: Readonly<Record<string, string>>;
  /** Follow redirects within the site, as a browser does. */
  readonly follow?: boolean;
}

/** A small browser: it keeps cookies, sends what a page of the site would send, and follows redirects. */
export class HttpClient {
  readonly cookies = new Map<string, string>();

  constructor(
    readonly url: string,
    readonly bearer?: string,
  ) {}

  get(path: string, options: RequestOptions = {}): Promise<Answer> {
    return this.request('GET', path, options);
  }
  post(path: string, body?: unknown, options: RequestOptions = {}): Promise<Answer> {
    return this.request('POST', path, { ...options, body });
  }
  put(path: string, body?: unknown, options: RequestOptions = {}): Promise<Answer> {
    return this.request('PUT', path, { ...options, body });
  }
  patch(path: string, body?: unknown, options: RequestOptions = {}): Promise<Answer> {
    return this.request('PATCH', path, { ...options, body });
  }
  delete(path: string, body?: unknown, options: RequestOptions = {}): Promise<Answer> {
    return this.request('DELETE', path, { ...options, body });
  }

  async request(method: string, path: string, options: RequestOptions = {}): Promise<Answer> {
    let target = new URL(path.startsWith('/') ? `${this.url}${path}` : path);
    for (let hop = 0; hop < 10; hop += 1) {
      const response = await fetch(target, {
        method,
        redirect: 'manual',
        headers: { ...this.#headers(method, options), ...options.headers },
        ...(options.form ? { body: options.form } : options.body === undefined ? {} : { body: JSON.stringify(options.body) }),
      });
      this.#keepCookies(response.headers);
      const location = response.headers.get('location');
      if (options.follow && location !== null && response.status >= 300 && response.status < 400) {
        await response.arrayBuffer();
        target = new URL(location, target);
        continue;
      }
      const text = await response.text();
      const json = /json/.test(response.headers.get('content-type') ?? '');
      return { status: response.status, headers: response.headers, text, body: json && text !== '' ? JSON.parse(text) : text };
    }
    throw new Error(`More than 10 redirects from ${path}.`);
  }

  #headers(method: string, options: RequestOptions): Record<string, string> {
    const headers: Record<string, string> = {};
    if (options.body !== undefined) headers['content-type'] = 'application/json';
    if (this.bearer !== undefined) headers['authorization'] = `Bearer ${this.bearer}`;
    else if (method !== 'GET') headers['origin'] = this.url;
    if (this.cookies.size > 0) headers['cookie'] = [...this.cookies].map(([name, value]) => `${name}=${value}`).join('; ');
    return headers;
  }

  #keepCookies(headers: Headers): void {
    for (const line of headers.getSetCookie()) {
      const [pair = ''] = line.split(';');
      const at = pair.indexOf('=');
      const [name, value] = [pair.slice(0, at), pair.slice(at + 1)];
      if (value === '') this.cookies.delete(name);
      else this.cookies.set(name, value);
    }
  }
}
