import { describe, expect, it } from 'vitest';
import { isAllowed } from '../../../src/lib/domain/permissions';
import { apiDocument, openApiPath } from '../../../src/lib/schemas/api/document';
import { operations } from '../../../src/lib/schemas/api/operations';
import { isPermission, routeAccess, scopeNeeded } from '../../../src/lib/server/auth/route-access';
import { findRoutes } from '../../routes/route-files';

type Json = Readonly<Record<string, unknown>>;
interface Described {
  readonly operationId: string;
  readonly summary: string;
  readonly parameters: readonly Readonly<{ name: string; in: string; required: boolean; schema: Json }>[];
  readonly responses: Readonly<Record<string, Readonly<{ description: string; content: Json }>>>;
  readonly security: readonly Json[];
}

const document = apiDocument() as Json & {
  readonly paths: Readonly<Record<string, Readonly<Record<string, Described>>>>;
  readonly components: Readonly<{ schemas: Json; securitySchemes: Json }>;
};
const described = Object.entries(document.paths).flatMap(([path, methods]) =>
  Object.entries(methods).map(([method, operation]) => ({ path, method, operation }))
);
const served = findRoutes()
  .filter(({ id }) => id.startsWith('/api/v1'))
  .flatMap(({ id, methods }) => methods.map((method) => ({ id, method: method.toLowerCase() })));

/** Every "$ref" below a value. */
function references(value: unknown): readonly string[] {
  if (typeof value !== 'object' || value === null) return [];
  return Object.entries(value).flatMap(([name, member]) =>
    name === '$ref' && typeof member === 'string' ? [member] : references(member)
  );
}

describe('the description of the API', () => {
  it('describes every route that is served, and none that is not', () => {
    expect(served.length).toBeGreaterThan(12);
    const want = served.map(({ id, method }) => `${method} ${openApiPath(id)}`).sort();
    expect(described.map(({ path, method }) => `${method} ${path}`).sort()).toEqual(want);
  });

  it('names each operation once', () => {
    const ids = described.map(({ operation }) => operation.operationId);
    expect(new Set(ids).size).toBe(ids.length);
    for (const { operation } of described) expect(operation.summary).not.toBe('');
  });

  it('lists the parameters of each path, all of them required', () => {
    for (const { path, operation } of described) {
      const inPath = [...path.matchAll(/\{([a-z]+)\}/gi)].map(([, name]) => name);
      const listed = operation.parameters.filter((parameter) => parameter.in === 'path');
      expect(
        listed.map(({ name }) => name),
        path
      ).toEqual(inPath);
      expect(listed.every(({ required }) => required)).toBe(true);
      const names = operation.parameters.map(({ name }) => name);
      expect(new Set(names).size, path).toBe(names.length);
    }
  });

  it('refers to nothing that it does not hold', () => {
    const { schemas } = document.components;
    const wanted = new Set(references(document));
    expect(wanted.size).toBeGreaterThan(20);
    for (const reference of wanted) {
      expect(reference).toMatch(/^#\/components\/schemas\//);
      expect(schemas).toHaveProperty([reference.slice('#/components/schemas/'.length)]);
    }
  });

  it('holds no schema that nothing refers to', () => {
    const wanted = new Set(references(document).map((reference) => reference.split('/').at(-1)));
    expect(Object.keys(document.components.schemas).filter((name) => !wanted.has(name))).toEqual([]);
  });

  it('asks for the scope that the request hook asks for', () => {
    for (const { routeId, method, scope, operationId } of operations) {
      const rule = routeAccess[routeId];
      const access =
        method === 'get' ? rule?.read : (rule?.write as Record<string, string>)[method.toUpperCase()];
      expect(access, operationId).toBeDefined();
      if (scope === null) expect(access).toBe('public');
      else {
        expect(scopeNeeded(routeId, method.toUpperCase()), operationId).toBe(scope);
        const operation = document.paths[openApiPath(routeId)]?.[method];
        expect(operation?.security).toEqual([{ accessKey: [scope] }]);
        for (const status of ['401', '403', '429']) expect(operation?.responses).toHaveProperty(status);
      }
    }
  });

  it('tells what a role may not do before a program finds out', () => {
    const writes = operations.filter(({ method }) => method === 'post');
    expect(writes.length).toBeGreaterThan(0);
    for (const { routeId } of writes) {
      const access = (routeAccess[routeId]?.write as Record<string, string>).POST ?? '';
      expect(isPermission(access as never) && isAllowed('reviewer', access as never)).toBe(false);
    }
  });

  it('answers failures as problems, and everything as a type that it names', () => {
    for (const { path, operation } of described) {
      for (const [status, { description, content }] of Object.entries(operation.responses)) {
        expect(description, `${path} ${status}`).not.toBe('');
        const types = Object.keys(content);
        expect(types.length).toBeGreaterThan(0);
        if (Number(status) >= 400) expect(types).toEqual(['application/problem+json']);
      }
    }
  });

  it('is plain JSON that names the version of the standard', () => {
    expect(document).toMatchObject({ openapi: '3.1.0', info: { title: 'Headwater' } });
    expect(JSON.parse(JSON.stringify(document))).toEqual(document);
    expect(JSON.stringify(document)).not.toContain('readOnly');
  });
});
