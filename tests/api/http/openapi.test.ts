import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openApiPath } from '../../../api/http/openapi.ts';
import { allRoutes } from '../../../api/routes/all-routes.ts';
import { startTestApp, type TestApp } from '../../support/test-app.ts';

interface Operation {
  readonly operationId: string;
  readonly summary: string;
  readonly parameters: readonly { readonly name: string; readonly in: string; readonly required: boolean; readonly schema: object }[];
  readonly requestBody?: { readonly content: Record<string, { readonly schema: object }> };
  readonly responses: Record<string, { readonly description: string }>;
}
interface Document {
  readonly openapi: string;
  readonly info: { readonly title: string; readonly version: string };
  readonly paths: Record<string, Record<string, Operation>>;
  readonly components: { readonly schemas: Record<string, object> };
}

let app: TestApp;
let document: Document;
beforeAll(async () => {
  app = await startTestApp();
  document = (await app.visitor.get('/api/v1/openapi.json')).body as Document;
});
afterAll(() => app.stop());

describe('the OpenAPI document', () => {
  it('names its version and every route', () => {
    expect(document.openapi).toMatch(/^3\.1\.\d+$/);
    for (const route of allRoutes) expect(document.paths[openApiPath(route.path)]?.[route.method], `${route.method} ${route.path}`).toBeDefined();
    const count = Object.values(document.paths).reduce((sum, path) => sum + Object.keys(path).length, 0);
    expect(count).toBe(allRoutes.length);
  });

  it('gives each operation an id of its own, an answer, and exactly the parameters of its path', () => {
    const ids: string[] = [];
    for (const [path, methods] of Object.entries(document.paths)) {
      const inPath = [...path.matchAll(/\{(\w+)\}/g)].map((match) => match[1]);
      for (const operation of Object.values(methods)) {
        ids.push(operation.operationId);
        expect(operation.summary.length).toBeGreaterThan(3);
        expect(operation.parameters.filter((parameter) => parameter.in === 'path').map((parameter) => parameter.name).sort()).toEqual(inPath.sort());
        expect(operation.parameters.filter((parameter) => parameter.in === 'path').every((parameter) => parameter.required)).toBe(true);
        expect(Object.keys(operation.responses).some((status) => /^20\d$/.test(status))).toBe(true);
        expect(operation.responses['default']).toBeDefined();
      }
    }
    expect(new Set(ids).size).toBe(ids.length);
  });

  it('resolves every reference, and refers to no schema outside itself', () => {
    const references = [...JSON.stringify(document).matchAll(/"\$ref":"([^"]+)"/g)].map((match) => match[1] ?? '');
    expect(references.length).toBeGreaterThan(0);
    for (const reference of references) {
      const name = /^#\/components\/schemas\/(.+)$/.exec(reference)?.[1];
      expect(name, reference).toBeDefined();
      expect(document.components.schemas[name ?? ''], reference).toBeDefined();
    }
  });

  it('describes requests as the client sends them: text in queries, strict objects in bodies', () => {
    const list = document.paths['/groups']?.['get'];
    expect(list?.parameters.find((parameter) => parameter.name === 'limit')?.schema).toMatchObject({ type: 'string' });
    const create = document.paths['/groups']?.['post'];
    expect(create?.requestBody?.content['application/json']?.schema).toMatchObject({ type: 'object', additionalProperties: false, required: ['name'] });
  });
});
