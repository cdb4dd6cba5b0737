import { z } from 'zod';
import { ErrorAnswer } from '@shared/schemas/errors';
import { PERMISSIONS } from '../policies/permissions';
import type { Route } from './route';

/** The API as an OpenAPI 3.1 document, made from the routes and the very schemas that check the requests. */
export function describeApi(routes: readonly Route[], version: string): object {
  const paths: Record<string, Record<string, object>> = {};
  for (const route of routes) {
    const path = route.path.replace(/:(\w+)/g, '{$1}');
    paths[path] = { ...paths[path], [route.method]: describeRoute(route) };
  }
  return {
    openapi: '3.1.0',
    info: {
      title: 'Swaymark',
      version,
      description:
        'Every request but GET carries the header `X-Swaymark: 1` and a JSON body. Errors have one shape: a stable code, a message that says what was seen and what to do, and the fields it is about.',
    },
    paths,
    components: {
      securitySchemes: {
        session: { type: 'apiKey', in: 'cookie', name: 'swaymark', description: '`__Host-swaymark` over https' },
        boardPass: { type: 'apiKey', in: 'header', name: 'X-Board-Pass' },
      },
    },
  };
}

function describeRoute(route: Route): object {
  const row = PERMISSIONS[route.action];
  const fields = [...parameters(route.params, 'path'), ...parameters(route.query, 'query')];
  if (route.method !== 'get') {
    fields.push({ name: 'X-Swaymark', in: 'header', required: true, schema: { const: '1' } });
  }
  return {
    operationId: `${route.method}_${route.path.replace(/^\/api\//, '').replace(/\W+/g, '_')}`,
    summary: route.summary,
    description: `May: ${Object.entries(row)
      .map(([kind, scope]) => `${kind} (${scope})`)
      .join(', ')}.`,
    security: 'nobody' in row ? [] : 'board' in row ? [{ boardPass: [] }] : [{ session: [] }],
    ...(fields.length > 0 && { parameters: fields }),
    ...(route.body && {
      requestBody: { required: true, content: { 'application/json': { schema: jsonSchema(route.body, 'input') } } },
    }),
    responses: {
      200: { description: 'Done', content: { 'application/json': { schema: jsonSchema(route.answer, 'output') } } },
      default: {
        description: 'Not done',
        content: { 'application/json': { schema: jsonSchema(ErrorAnswer, 'output') } },
      },
    },
  };
}

function parameters(schema: z.ZodType | undefined, place: 'path' | 'query'): object[] {
  if (!schema) return [];
  const { properties = {}, required = [] } = jsonSchema(schema, 'input') as {
    properties?: Record<string, object>;
    required?: string[];
  };
  return Object.entries(properties).map(([name, of]) => ({
    name,
    in: place,
    required: required.includes(name),
    schema: of,
  }));
}

/** OpenAPI 3.1 takes JSON Schema 2020-12 as it is. What a transform makes of a text is not describable; the text is. */
function jsonSchema(schema: z.ZodType, io: 'input' | 'output'): object {
  const described = z.toJSONSchema(schema, { target: 'draft-2020-12', io, unrepresentable: 'any' });
  delete described.$schema;
  return described;
}
