import { z } from 'zod';

export const apiBase = '/api/v1';

const issueSchema = z.object({
  path: z.array(z.union([z.string(), z.number()])).default([]),
  message: z.string(),
  row: z.number().optional(),
  column: z.number().optional(),
});
export type ApiIssue = z.infer<typeof issueSchema>;

/** Problem details (RFC 9457) as the server sends them. */
const problemSchema = z.object({
  code: z.string().default('internal'),
  title: z.string().optional(),
  detail: z.string().optional(),
  message: z.string().optional(),
  issues: z.array(issueSchema).optional(),
  requestId: z.string().optional(),
  extra: z.record(z.string(), z.unknown()).optional(),
});

/** A refused or failed request. `message` is for the reader; `issues` name fields or cells. */
export class ApiError extends Error {
  override readonly name = 'ApiError';
  constructor(
    message: string,
    readonly status: number,
    readonly code: string,
    readonly title: string,
    readonly issues: readonly ApiIssue[] = [],
    readonly requestId?: string,
    options?: { cause?: unknown; extra?: Record<string, unknown> },
  ) {
    super(message, options);
    this.extra = options?.extra;
  }
  /** What the code adds: the cells around a fault of a file, for instance. */
  readonly extra?: Record<string, unknown>;

  /** The first message for a field, by its dotted path. */
  issueAt(path: string): string | undefined {
    return this.issues.find((i) => i.path.join('.') === path)?.message;
  }
}

export const isApiError = (e: unknown): e is ApiError => e instanceof ApiError;

type QueryValue = string | number | boolean | null | undefined | readonly (string | number)[];
export interface RequestOptions {
  query?: Record<string, QueryValue>;
  /** Sent as JSON. */
  json?: unknown;
  /** Sent as multipart/form-data or a raw body. */
  body?: FormData | Blob | ArrayBuffer;
  headers?: Record<string, string>;
  signal?: AbortSignal;
}

/** `/api/v1` + path + query; lists are joined with commas, absent values left out. */
export function apiUrl(path: string, query: Record<string, QueryValue> = {}): string {
  const search = new URLSearchParams();
  for (const [key, value] of Object.entries(query)) {
    if (value === undefined || value === null || value === '') continue;
    search.set(key, Array.isArray(value) ? value.join(',') : String(value));
  }
  const text = search.toString();
  return `${apiBase}${path}${text ? `?${text}` : ''}`;
}

async function send(method: string, path: string, options: RequestOptions): Promise<Response> {
  const headers: Record<string, string> = { accept: 'application/json', ...options.headers };
  let body: BodyInit | undefined = options.body;
  if (options.json !== undefined) {
    headers['content-type'] = 'application/json';
    body = JSON.stringify(options.json);
  }
  let response: Response;
  try {
    response = await fetch(apiUrl(path, options.query), { method, headers, body, signal: options.signal ?? null, credentials: 'same-origin' });
  } catch (cause) {
    if (options.signal?.aborted) throw cause;
    throw new ApiError('The server cannot be reached. Check the connection and try again.', 0, 'offline', 'No connection', [], undefined, { cause });
  }
  if (!response.ok) throw await toApiError(response);
  return response;
}

async function toApiError(response: Response): Promise<ApiError> {
  const raw: unknown = await response.json().catch(() => undefined);
  const parsed = problemSchema.safeParse(raw ?? {});
  const problem = parsed.success ? parsed.data : { code: 'internal' };
  const title = ('title' in problem && problem.title) || `The server answered ${response.status}`;
  const detail = ('detail' in problem && problem.detail) || ('message' in problem && problem.message) || title;
  const issues = 'issues' in problem ? (problem.issues ?? []) : [];
  return new ApiError(detail, response.status, problem.code, title, issues, 'requestId' in problem ? problem.requestId : undefined, 'extra' in problem && problem.extra ? { extra: problem.extra } : undefined);
}

/** Sends a request and parses the answer by its schema; a 204 is parsed as `null`. */
export async function request<S extends z.ZodType>(method: string, path: string, schema: S, options: RequestOptions = {}): Promise<z.output<S>> {
  const response = await send(method, path, options);
  const raw: unknown = response.status === 204 ? null : await response.json();
  const parsed = schema.safeParse(raw);
  if (!parsed.success) {
    const first = parsed.error.issues[0];
    throw new ApiError(
      `The server's answer is not what this page expects${first ? ` (${first.path.join('.') || 'top level'}: ${first.message})` : ''}. Reload the page; if it stays, its version is too old.`,
      response.status, 'unexpected-answer', 'Unexpected answer', [], undefined, { cause: parsed.error },
    );
  }
  return parsed.data;
}

export const api = {
  get: <S extends z.ZodType>(path: string, schema: S, options?: Omit<RequestOptions, 'json' | 'body'>) => request('GET', path, schema, options),
  post: <S extends z.ZodType>(path: string, schema: S, options?: RequestOptions) => request('POST', path, schema, options),
  put: <S extends z.ZodType>(path: string, schema: S, options?: RequestOptions) => request('PUT', path, schema, options),
  patch: <S extends z.ZodType>(path: string, schema: S, options?: RequestOptions) => request('PATCH', path, schema, options),
  delete: <S extends z.ZodType>(path: string, schema: S, options?: RequestOptions) => request('DELETE', path, schema, options),
  /** Little-endian Float64 values (`application/octet-stream`). */
  float64: async (path: string, options: Omit<RequestOptions, 'json' | 'body'> = {}): Promise<Float64Array> => {
    const response = await send('GET', path, { ...options, headers: { accept: 'application/octet-stream' } });
    return new Float64Array(await response.arrayBuffer());
  },
};
