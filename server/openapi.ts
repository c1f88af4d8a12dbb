import * as z from 'zod';
import { createDocument, type ZodOpenApiOperationObject, type ZodOpenApiPathsObject } from 'zod-openapi';
import { ACTIONS, CONTRACT, type Endpoint, type Failure, problemBody, ROUTES, type RouteName } from '#api';
import { FAILURES } from './http/problem.ts';

const problem = problemBody.meta({ id: 'Problem', description: 'A refused request (RFC 9457).' });

/** Which failures an endpoint may answer by its shape; what its rules add (409, 422) is in its summary. */
function failuresOf(name: RouteName, endpoint: Endpoint): readonly Failure['kind'][] {
  const kinds: Failure['kind'][] = [];
  if (ACTIONS[ROUTES[name].action] !== 'anyone') kinds.push('not-signed-in', 'forbidden');
  if (endpoint.params) kinds.push('not-found');
  if (endpoint.query || endpoint.body) kinds.push('invalid');
  if (endpoint.body) kinds.push('stale', 'checks-failed', 'too-large', 'gone');
  if (ACTIONS[ROUTES[name].action] === 'anyone') kinds.push('too-many');
  return kinds;
}

function operation(name: RouteName): ZodOpenApiOperationObject {
  const endpoint: Endpoint = (CONTRACT satisfies Record<RouteName, Endpoint>)[name];
  const { action } = ROUTES[name];
  const problems = failuresOf(name, endpoint).map((kind) => [
    String(FAILURES[kind].status),
    { description: FAILURES[kind].title, content: { 'application/problem+json': { schema: problem } } },
  ]);
  return {
    operationId: name,
    summary: endpoint.summary,
    description: `Needs: ${action} (${ACTIONS[action]}).`,
    tags: [name.split('.', 1)[0] ?? name],
    ...(endpoint.params || endpoint.query
      ? {
          requestParams: {
            ...(endpoint.params ? { path: endpoint.params } : {}),
            ...(endpoint.query ? { query: endpoint.query } : {}),
          },
        }
      : {}),
    ...(endpoint.body
      ? { requestBody: { required: true, content: { 'application/json': { schema: endpoint.body } } } }
      : {}),
    responses: {
      '200': { description: 'Done', content: { 'application/json': { schema: endpoint.answer } } },
      ...Object.fromEntries(problems),
    },
    ...(ACTIONS[action] === 'anyone' ? {} : { security: [{ session: [] }] }),
  };
}

/** Makes the OpenAPI 3.1 document of the contract. */
export function openapiDocument(version: string): ReturnType<typeof createDocument> {
  const paths: Record<string, ZodOpenApiPathsObject[string]> = {};
  for (const name of Object.keys(ROUTES) as RouteName[]) {
    const path = ROUTES[name].path.replace(/:(\w+)/g, '{$1}');
    paths[path] = { ...paths[path], [ROUTES[name].method.toLowerCase()]: operation(name) };
  }
  return createDocument(
    {
      openapi: '3.1.0',
      info: {
        title: 'Quadrille',
        version,
        description: 'Recipes of analog circuits, their drafts, reviews and designs.',
      },
      paths,
      components: { securitySchemes: { session: { type: 'apiKey', in: 'cookie', name: 'quadrille.session_token' } } },
    },
    { override: ({ zodSchema, jsonSchema }) => describeOwnShapes(zodSchema, jsonSchema) },
  );
}

/** Documents and diagnostics are our own data, held by types and not by a schema: any object, as far as a reader of this page is told. */
function describeOwnShapes(zodSchema: z.core.$ZodTypes, jsonSchema: { type?: unknown }): void {
  if (zodSchema instanceof z.ZodCustom) jsonSchema.type = 'object';
}
