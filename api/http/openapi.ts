import { z } from 'zod';
import { problemSchema } from '../../shared/contracts/problem.ts';
import { permissions } from '../../shared/domain/permissions.ts';
import { scopeOfPermission, tokenScopeNames } from '../../shared/domain/token-scopes.ts';
import type { Route } from './define-route.ts';

type Json = { [key: string]: unknown };

/** The OpenAPI 3.1 document of the given routes. */
export function buildOpenApi(routes: readonly Route[]): Json {
  const components: Json = {};
  const schemaOf = (schema: z.ZodType, io: 'input' | 'output'): Json => toComponentRefs(schema, io, components);
  const problem = schemaOf(problemSchema, 'output');
  const paths: { [path: string]: Json } = {};
  for (const route of routes) {
    const path = openApiPath(route.path);
    paths[path] = { ...paths[path], [route.method]: operation(route, schemaOf, problem) };
  }
  return {
    openapi: '3.1.0',
    jsonSchemaDialect: 'https://json-schema.org/draft/2020-12/schema',
    info: {
      title: 'Hadamark',
      version: '1',
      summary: 'A registry of validated reconstruction methods for inverse problems.',
      license: { name: 'MIT', identifier: 'MIT' },
      description:
        'Reading what is published needs no account. Everything else takes a browser session or a bearer token. ' +
        'Errors are problem details (RFC 9457). Lists come in pages: pass nextCursor as cursor.',
    },
    servers: [{ url: '/api/v1' }],
    tags: [...new Set(routes.map((route) => route.tag))].map((name) => ({ name })),
    paths,
    components: {
      schemas: components,
      securitySchemes: {
        token: { type: 'http', scheme: 'bearer', description: `Scopes: ${Object.entries(tokenScopeNames).map(([scope, line]) => `${scope} (${line})`).join('; ')}.` },
        session: { type: 'apiKey', in: 'cookie', name: 'hadamark.sid' },
      },
    },
  };
}

export function openApiPath(path: string): string {
  return path.replace(/[:*]([A-Za-z]\w*)/g, '{$1}');
}

function operation(route: Route, schemaOf: (schema: z.ZodType, io: 'input' | 'output') => Json, problem: Json): Json {
  const permission = route.permission === 'public' ? null : permissions[route.permission];
  const scope = route.permission === 'public' ? null : scopeOfPermission[route.permission];
  const notes = [
    route.description,
    permission ? `Who may: ${permission.who}.` : 'Who may: everybody.',
    route.permission === 'public' ? undefined : scope === null ? 'Browser session only.' : `Token scope: ${scope}.`,
  ].filter((note) => note !== undefined);
  const open = route.permission === 'public' || route.permission === 'content.read';
  return {
    operationId: operationId(route),
    tags: [route.tag],
    summary: route.summary,
    description: notes.join(' '),
    security: [...(open ? [{}] : []), ...(permission && scope === null ? [] : [{ token: [] }]), { session: [] }],
    parameters: [...parameters(route, 'path', schemaOf), ...parameters(route, 'query', schemaOf)],
    ...requestBody(route, schemaOf),
    responses: {
      [String(route.status)]: success(route, schemaOf),
      default: { description: 'Problem details', content: { 'application/problem+json': { schema: problem } } },
    },
  };
}

function success(route: Route, schemaOf: (schema: z.ZodType, io: 'input' | 'output') => Json): Json {
  if (route.produces) {
    return { description: 'The file or the event stream', content: Object.fromEntries(route.produces.map((type) => [type, { schema: {} }])) };
  }
  if (!route.schemas.response) return { description: 'Done; no body' };
  return { description: 'Done', content: { 'application/json': { schema: schemaOf(route.schemas.response, 'output') } } };
}

function parameters(route: Route, where: 'path' | 'query', schemaOf: (schema: z.ZodType, io: 'input' | 'output') => Json): Json[] {
  const schema = where === 'path' ? route.schemas.params : route.schemas.query;
  if (!schema) return [];
  const object = schemaOf(schema, 'input');
  const properties = (object['properties'] ?? {}) as Record<string, Json>;
  const required = (object['required'] ?? []) as string[];
  return Object.entries(properties).map(([name, property]) => {
    const { description, ...rest } = property;
    return {
      name,
      in: where,
      required: where === 'path' || required.includes(name),
      ...(description === undefined ? {} : { description }),
      schema: rest,
    };
  });
}

function requestBody(route: Route, schemaOf: (schema: z.ZodType, io: 'input' | 'output') => Json): Json {
  const body = route.schemas.body ? schemaOf(route.schemas.body, 'input') : undefined;
  if (!route.file) return body ? { requestBody: { required: true, content: { 'application/json': { schema: body } } } } : {};
  const file = { type: 'string', contentMediaType: 'application/octet-stream', description: route.file.description };
  const own: Json = { type: 'object', properties: { [route.file.field]: file }, required: route.file.optional ? [] : [route.file.field] };
  return { requestBody: { required: true, content: { 'multipart/form-data': { schema: body ? { allOf: [body, own] } : own } } } };
}

function operationId(route: Route): string {
  const words = route.path.split('/').filter((part) => part !== '');
  return [route.method, ...words].map((word) => word.replace(/[^A-Za-z0-9]+/g, '')).map((word, i) => (i === 0 ? word : word.charAt(0).toUpperCase() + word.slice(1))).join('');
}

/** JSON Schema of a contract, with its named parts moved to the document's components. */
function toComponentRefs(schema: z.ZodType, io: 'input' | 'output', components: Json): Json {
  const { $schema: _dialect, $defs, ...own } = z.toJSONSchema(schema, { io, unrepresentable: 'any' }) as Json;
  // A named part may look different on the way in (defaults, transforms) and on the way out.
  const suffix = io === 'input' ? 'Input' : '';
  const text = (value: unknown): string => JSON.stringify(value).replace(/"#\/\$defs\/([^"]+)"/g, (_, name: string) => `"#/components/schemas/${name}${suffix}"`);
  for (const [name, part] of Object.entries(($defs ?? {}) as Json)) {
    const { id: _id, ...definition } = part as Json;
    components[`${name}${suffix}`] = JSON.parse(text(definition));
  }
  const { id, ...rest } = own;
  if (typeof id === 'string') {
    components[`${id}${suffix}`] = JSON.parse(text(rest));
    return { $ref: `#/components/schemas/${id}${suffix}` };
  }
  return JSON.parse(text(rest)) as Json;
}
