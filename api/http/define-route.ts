/**
 * One definition per route. The Express routes, the OpenAPI document and the test that walks every route with every
 * role are all made from these definitions, so a route that is not defined here does not exist.
 *
 *   export const renameGroup = defineRoute({
 *     method: 'patch',
 *     path: '/groups/:slug',                     // under /api/v1
 *     tag: 'groups',
 *     summary: 'Rename a group',
 *     permission: 'group.manage',                // or 'public'
 *     params: groupParamsSchema,                 // strict; params and query arrive as text
 *     body: groupEditSchema,
 *     response: groupSchema,                     // parsed on the way out: unknown keys are stripped
 *     load: ({ em, params }) => findGroup(em, params.slug),          // throws AppError('not-found')
 *     subject: (group) => ({ groupId: group.id }),                   // facts for can()
 *     handle: ({ em, actor, loaded, body }) => editGroup(em, { actor, group: loaded, ...body }),
 *   });
 *
 * Order of work: params, query, sign-in, load, permission, upload, body, handle. When the facts are in the body (a thing
 * made inside a group), give `bodySubject` and the permission is checked after the body. A reader who may not read the
 * thing gets 404, so that a draft's address says nothing.
 * A file or an event stream is sent by `defineRawRoute`, whose handler returns a `FileReply` or an `EventsReply`.
 * Register the definition in `api/routes/all-routes.ts`, and its walk case in `tests/api/support/route-cases.ts`.
 */
import type { EntityManager } from '@mikro-orm/sqlite';
import type { Readable } from 'node:stream';
import { z } from 'zod';
import { can, type Permission, type Subject } from '../../shared/domain/permissions.ts';
import { scopeOfPermission } from '../../shared/domain/token-scopes.ts';
import { AppError } from '../../shared/errors.ts';
import type { Dependencies } from '../dependencies.ts';
import type { RequestActor } from './actor.ts';
import type { EventStream } from './server-sent-events.ts';

export type Method = 'get' | 'post' | 'put' | 'patch' | 'delete';
export type LimitName = 'upload' | 'simulate' | 'sign-in';
export type RoutePermission = Permission | 'public';

export interface FileSpec {
  /** Name of the multipart field. */
  readonly field: string;
  readonly maxBytes: number;
  readonly description: string;
  readonly optional?: boolean;
}
export interface UploadedFile {
  readonly name: string;
  readonly bytes: Uint8Array;
}

export interface FileReply {
  readonly kind: 'file';
  readonly contentType: string;
  readonly body: string | Uint8Array | Readable;
  /** Makes the browser save it under this name. */
  readonly fileName?: string;
  readonly etag?: string;
}
export interface EventsReply {
  readonly kind: 'events';
  /** Called once the stream is open. Returns what to do when the reader goes away. */
  readonly start: (stream: EventStream) => void | (() => void);
}
export type Reply =
  | { readonly kind: 'json'; readonly status: number; readonly body: unknown; readonly etag?: string; readonly location?: string }
  | { readonly kind: 'empty'; readonly status: 204 }
  | FileReply
  | EventsReply;

/** The browser session behind the request, for the few routes that end it. */
export interface SessionHandle {
  readonly end: () => Promise<void>;
}

/** A request before anything of it is trusted. */
export interface RawRequest {
  readonly em: EntityManager;
  readonly deps: Dependencies;
  readonly actor: RequestActor | null;
  readonly session: SessionHandle;
  readonly requestId: string;
  /** Scheme and host the reader used. */
  readonly origin: string;
  readonly params: unknown;
  readonly query: unknown;
  readonly body: unknown;
  readonly readUpload: (spec: FileSpec) => Promise<{ fields: unknown; file: UploadedFile | undefined }>;
}

type ActorFor<P extends RoutePermission> = P extends 'public' | 'content.read' ? RequestActor | null : RequestActor;
interface BaseContext<Perm extends RoutePermission> extends Omit<RawRequest, 'params' | 'query' | 'body' | 'readUpload' | 'actor'> {
  readonly actor: ActorFor<Perm>;
}
export interface LoadContext<Perm extends RoutePermission, P, Q> extends BaseContext<Perm> {
  readonly params: P;
  readonly query: Q;
}
export interface HandleContext<Perm extends RoutePermission, P, Q, B, L> extends LoadContext<Perm, P, Q> {
  readonly body: B;
  readonly loaded: L;
  readonly file: UploadedFile | undefined;
}

interface CommonRoute<Perm extends RoutePermission, P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType, L> {
  readonly method: Method;
  /** Express 5 path under /api/v1. */
  readonly path: string;
  readonly tag: string;
  readonly summary: string;
  readonly description?: string;
  readonly permission: Perm;
  readonly params?: P;
  readonly query?: Q;
  readonly body?: B;
  readonly file?: FileSpec;
  readonly limit?: LimitName;
  readonly load?: (context: LoadContext<Perm, z.output<P>, z.output<Q>>) => Promise<L> | L;
  readonly subject?: (loaded: L, context: LoadContext<Perm, z.output<P>, z.output<Q>>) => Promise<Subject> | Subject;
  readonly bodySubject?: (
    body: z.output<B>,
    context: LoadContext<Perm, z.output<P>, z.output<Q>> & { readonly loaded: L },
  ) => Promise<Subject> | Subject;
}
interface JsonRoute<Perm extends RoutePermission, P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType, L, R extends z.ZodType>
  extends CommonRoute<Perm, P, Q, B, L> {
  /** Absent: the answer is 204 without a body. */
  readonly response?: R;
  /** 200 unless given. */
  readonly status?: 200 | 201 | 202;
  readonly location?: (result: z.output<R>) => string;
  /** For immutable versions: a content hash. A matching If-None-Match is answered with 304. */
  readonly etag?: (result: z.output<R>) => string | undefined;
  readonly handle: (
    context: HandleContext<Perm, z.output<P>, z.output<Q>, z.output<B>, L>,
  ) => Promise<z.input<R> | void> | z.input<R> | void;
}
interface RawRoute<Perm extends RoutePermission, P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType, L>
  extends CommonRoute<Perm, P, Q, B, L> {
  /** Content types of the answer. */
  readonly produces: readonly string[];
  readonly handle: (
    context: HandleContext<Perm, z.output<P>, z.output<Q>, z.output<B>, L>,
  ) => Promise<FileReply | EventsReply> | FileReply | EventsReply;
}

/** What the app, the OpenAPI document and the permission walk see of a route. */
export interface Route {
  readonly method: Method;
  readonly path: string;
  readonly tag: string;
  readonly summary: string;
  readonly description: string | undefined;
  readonly permission: RoutePermission;
  readonly limit: LimitName | undefined;
  readonly file: FileSpec | undefined;
  readonly status: number;
  readonly schemas: {
    readonly params: z.ZodType | undefined;
    readonly query: z.ZodType | undefined;
    readonly body: z.ZodType | undefined;
    readonly response: z.ZodType | undefined;
  };
  readonly produces: readonly string[] | undefined;
  readonly execute: (raw: RawRequest) => Promise<Reply>;
}

const nothing = z.strictObject({});
type Nothing = typeof nothing;

export function defineRoute<
  Perm extends RoutePermission,
  P extends z.ZodType = Nothing,
  Q extends z.ZodType = Nothing,
  B extends z.ZodType = z.ZodUndefined,
  L = undefined,
  R extends z.ZodType = z.ZodUndefined,
>(route: JsonRoute<Perm, P, Q, B, L, R>): Route {
  const status = route.response ? (route.status ?? 200) : 204;
  return {
    ...describe(route),
    status,
    schemas: { ...inputSchemas(route), response: route.response },
    produces: undefined,
    execute: async (raw) => {
      const result = await route.handle(await prepare(route, raw));
      if (!route.response) return { kind: 'empty', status: 204 };
      const parsed = route.response.safeParse(result);
      // A response that does not match its contract is a fault of the server, never of the reader.
      if (!parsed.success) throw new Error(`${route.method} ${route.path} answered outside its contract`, { cause: parsed.error });
      const etag = route.etag?.(parsed.data);
      const location = route.location?.(parsed.data);
      return {
        kind: 'json',
        status,
        body: parsed.data,
        ...(etag === undefined ? {} : { etag }),
        ...(location === undefined ? {} : { location }),
      };
    },
  };
}

export function defineRawRoute<
  Perm extends RoutePermission,
  P extends z.ZodType = Nothing,
  Q extends z.ZodType = Nothing,
  B extends z.ZodType = z.ZodUndefined,
  L = undefined,
>(route: RawRoute<Perm, P, Q, B, L>): Route {
  return {
    ...describe(route),
    status: 200,
    schemas: { ...inputSchemas(route), response: undefined },
    produces: route.produces,
    execute: async (raw) => route.handle(await prepare(route, raw)),
  };
}

function describe<Perm extends RoutePermission, P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType, L>(
  route: CommonRoute<Perm, P, Q, B, L>,
) {
  const { method, path, tag, summary, description, permission, limit, file } = route;
  return { method, path, tag, summary, description, permission, limit, file };
}
function inputSchemas<Perm extends RoutePermission, P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType, L>(
  route: CommonRoute<Perm, P, Q, B, L>,
) {
  return { params: route.params, query: route.query, body: route.body };
}

async function prepare<Perm extends RoutePermission, P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType, L>(
  route: CommonRoute<Perm, P, Q, B, L>,
  raw: RawRequest,
): Promise<HandleContext<Perm, z.output<P>, z.output<Q>, z.output<B>, L>> {
  const params = parsePart(route.params, raw.params, 'not-found');
  const query = parsePart(route.query, raw.query, 'validation-failed');
  const needsActor = route.permission !== 'public' && route.permission !== 'content.read';
  if (needsActor && !raw.actor) throw new AppError('not-signed-in', 'Sign in, or send a bearer token that is valid.');
  checkScope(route.permission, raw.actor);
  const { em, deps, session, requestId, origin } = raw;
  // The check above is what narrows the actor; the conditional type cannot follow it.
  const actor = raw.actor as ActorFor<Perm>;
  const context = { em, deps, session, requestId, origin, actor, params, query };
  // Without `load`, L is undefined.
  const loaded = (route.load ? await route.load(context) : undefined) as L;
  const early = route.subject ? await route.subject(loaded, context) : {};
  if (!route.bodySubject) authorise(route.permission, raw.actor, early);
  const upload = route.file ? await raw.readUpload(route.file) : undefined;
  if (route.file && !upload?.file && !route.file.optional) {
    throw new AppError('file-rejected', `Send the file in the multipart field '${route.file.field}'.`, [
      { path: [route.file.field], message: 'A file is needed.' },
    ]);
  }
  const body = route.body
    ? parsePart(route.body, (upload ? upload.fields : raw.body) ?? {}, 'validation-failed')
    : (undefined as z.output<B>);
  if (route.bodySubject) {
    authorise(route.permission, raw.actor, { ...early, ...(await route.bodySubject(body, { ...context, loaded })) });
  }
  return { ...context, body, loaded, file: upload?.file };
}

function parsePart<S extends z.ZodType>(schema: S | undefined, value: unknown, code: 'not-found' | 'validation-failed'): z.output<S> {
  const parsed = (schema ?? nothing).safeParse(value);
  if (parsed.success) return parsed.data as z.output<S>;
  if (code === 'not-found') throw new AppError('not-found', 'No such address.');
  throw parsed.error;
}

function checkScope(permission: RoutePermission, actor: RequestActor | null): void {
  if (!actor?.scopes || permission === 'public') return;
  const scope = scopeOfPermission[permission];
  if (scope === null) throw new AppError('forbidden', 'A token may not do this. Sign in with a browser.');
  if (!actor.scopes.includes(scope)) throw new AppError('forbidden', `This needs a token with the scope '${scope}'.`);
}

/** Throws unless the actor may. Services that decide on something only they know may call it too. */
export function authorise(permission: RoutePermission, actor: RequestActor | null, subject: Subject): void {
  if (permission === 'public' || can(actor, permission, subject)) return;
  if (permission === 'content.read' || (subject.published === false && !can(actor, 'content.read', subject))) {
    throw new AppError('not-found', 'Nothing is registered here, or you may not read it.');
  }
  if (!actor) throw new AppError('not-signed-in', 'Sign in, or send a bearer token that is valid.');
  throw new AppError('forbidden', 'Your roles here do not allow this.');
}
