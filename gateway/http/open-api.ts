import { z } from 'zod';
import * as f from '#shared/contract/fields';
import { problem } from '#shared/contract/problem';
import { PERMISSIONS } from '#shared/contract/roles';
import type { RouteDefinition } from '#shared/contract/route';

type Json = Record<string, unknown>;

export interface NamedRoute {
  /** feature.action */
  readonly name: string;
  readonly route: RouteDefinition;
}

/** The API in OpenAPI 3.1, made of the very schemas that check requests and answers. */
export function openApi(routes: readonly NamedRoute[], publicUrl: string): Json {
  const paths: Record<string, Json> = {};
  for (const named of routes) {
    const path = named.route.path.replace(/:(\w+)/g, '{$1}');
    paths[path] = { ...paths[path], [named.route.method.toLowerCase()]: operation(named) };
  }
  return {
    openapi: '3.1.0',
    info: {
      title: 'Stillroom',
      version: '1',
      description:
        'Times are ISO 8601 in UTC, temperatures °C, humidities per cent. Sign in for a bearer token of ten minutes.',
    },
    servers: [{ url: publicUrl }],
    tags: [...new Set(routes.map(featureOf))].map((name) => ({ name })),
    paths,
    components: {
      securitySchemes: { bearer: { type: 'http', scheme: 'bearer', bearerFormat: 'JWT' } },
      schemas: { Problem: schemaOf(problem, 'output') },
      responses: {
        Problem: {
          description: 'Refused; `detail` says what to do (RFC 9457).',
          content: { 'application/problem+json': { schema: { $ref: '#/components/schemas/Problem' } } },
        },
      },
    },
  };
}

function operation(named: NamedRoute): Json {
  const { route } = named;
  return {
    operationId: named.name,
    summary: route.title,
    description: whoMay(route),
    tags: [featureOf(named)],
    security: route.scope === 'public' ? [] : [{ bearer: [] }],
    parameters: [...parameters(route.params, 'path'), ...parameters(route.query, 'query')],
    ...(route.body === f.noBody ? {} : { requestBody: requestBody(route) }),
    responses: { ...success(route), default: { $ref: '#/components/responses/Problem' } },
  };
}

function whoMay({ scope, permission }: RouteDefinition): string {
  if (scope === 'public') return 'Anybody.';
  if (permission === null) return 'Anybody who is signed in, about themselves or their own studios.';
  const where = scope === 'studio' ? 'in the studio of the path' : 'in at least one studio';
  return `Roles ${PERMISSIONS[permission].join(', ')} ${where} (${permission}).`;
}

function parameters(schema: z.ZodType, where: 'path' | 'query'): Json[] {
  const { properties = {}, required = [] } = schemaOf(schema, 'input') as {
    properties?: Record<string, Json>;
    required?: string[];
  };
  return Object.entries(properties).map(([name, property]) => ({
    name,
    in: where,
    required: required.includes(name),
    schema: property,
  }));
}

function requestBody(route: RouteDefinition): Json {
  return { required: true, content: { 'application/json': { schema: schemaOf(route.body, 'input') } } };
}

function success(route: RouteDefinition): Json {
  if (route.reply === f.nothing) return { '204': { description: 'Done.' } };
  const schema = schemaOf(route.reply, 'output');
  return { '200': { description: 'Done.', content: { 'application/json': { schema } } } };
}

/** JSON Schema 2020-12, the dialect of OpenAPI 3.1, without the line that names it. */
function schemaOf(schema: z.ZodType, io: 'input' | 'output'): Json {
  const { $schema: _dialect, ...rest } = z.toJSONSchema(schema, { io }) as Json;
  return rest;
}

function featureOf({ name }: NamedRoute): string {
  return name.split('.')[0] ?? name;
}
