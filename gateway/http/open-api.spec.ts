import { describe, expect, it } from 'vitest';
import { ALL_ROUTES } from '#shared/contract/all-routes';
import { openApi } from './open-api.js';

type Json = Record<string, ReturnType<typeof JSON.parse>>;
const description = openApi(ALL_ROUTES, 'https://stillroom.larkrise.example');
const operations: [string, string, Json][] = Object.entries(description.paths as Json).flatMap(
  ([path, methods]) =>
    Object.entries(methods as Json).map(
      ([method, operation]) => [path, method, operation] as [string, string, Json],
    ),
);

/** Every value under a key, anywhere. */
function all(value: unknown, key: string): unknown[] {
  if (typeof value !== 'object' || value === null) return [];
  return Object.entries(value).flatMap(([name, inner]) => [
    ...(name === key ? [inner] : []),
    ...all(inner, key),
  ]);
}

/** What a JSON pointer inside the description points at (RFC 6901). */
function at(pointer: string): unknown {
  return pointer
    .replace(/^#\//, '')
    .split('/')
    .reduce<unknown>((value, part) => (value as Json)[part], description);
}

describe('openApi', () => {
  it('describes every route of the contract once', () => {
    expect(description.openapi).toBe('3.1.0');
    expect(operations).toHaveLength(ALL_ROUTES.length);
    const ids = operations.map(([, , operation]) => operation.operationId);
    expect(new Set(ids).size).toBe(ids.length);
    expect(ids.sort()).toEqual(ALL_ROUTES.map(({ name }) => name).sort());
  });

  it.each(operations)(
    '%s %s names its path parameters, a title, who may, and answers',
    (path, _method, operation) => {
      const named = [...path.matchAll(/\{(\w+)\}/g)].map(([, name]) => name).sort();
      const given = operation.parameters.filter((one: Json) => one.in === 'path');
      expect(given.map((one: Json) => one.name).sort()).toEqual(named);
      expect(given.every((one: Json) => one.required === true)).toBe(true);
      expect(operation.summary.length).toBeGreaterThan(5);
      expect(operation.description).toMatch(/^(Anybody|Roles )/);
      expect(Object.keys(operation.responses)).toHaveLength(2);
      expect(operation.responses.default).toEqual({ $ref: '#/components/responses/Problem' });
    },
  );

  it('points nowhere that is not there', () => {
    const pointers = all(description, '$ref') as string[];
    expect(pointers.length).toBeGreaterThan(ALL_ROUTES.length);
    for (const pointer of new Set(pointers)) expect([pointer, at(pointer)]).not.toEqual([pointer, undefined]);
  });

  it('says what a body must hold, before defaults, and that GET has none', () => {
    const body = (id: string) =>
      operations.find(([, , operation]) => operation.operationId === id)![2].requestBody?.content[
        'application/json'
      ].schema as Json | undefined;
    expect(body('studios.create')).toMatchObject({
      type: 'object',
      additionalProperties: false,
      required: ['name', 'timeZone', 'unit'],
    });
    expect(body('session.signIn')?.properties.email).toMatchObject({ type: 'string', format: 'email' });
    expect(
      operations.filter(([, method]) => method === 'get').every(([, , one]) => one.requestBody === undefined),
    ).toBe(true);
    expect(body('session.refresh')).toBeUndefined();
  });

  it('asks for a token everywhere but where anybody may come', () => {
    const open = operations
      .filter(([, , { security }]) => security.length === 0)
      .map(([, , { operationId }]) => operationId);
    expect(open.sort()).toEqual(
      ALL_ROUTES.filter(({ route }) => route.scope === 'public')
        .map(({ name }) => name)
        .sort(),
    );
  });

  it('can be written as JSON', () => {
    expect(JSON.parse(JSON.stringify(description))).toEqual(description);
  });
});
