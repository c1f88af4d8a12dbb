import type * as z from 'zod';
import { designsContract } from './designs.ts';
import { draftsContract, reviewsContract } from './drafts.ts';
import type { Endpoint } from './endpoint.ts';
import { peopleContract } from './people.ts';
import { recipesContract } from './recipes.ts';
import type { RouteName } from './routes.ts';
import { teamContract } from './team.ts';

/** Every endpoint with its schemas, by the names of `ROUTES`. The server parses by it, the OpenAPI document is made from it. */
export const CONTRACT = {
  ...peopleContract,
  ...teamContract,
  ...recipesContract,
  ...draftsContract,
  ...reviewsContract,
  ...designsContract,
} satisfies Record<RouteName, Endpoint>;

export type Contract = typeof CONTRACT;
type Part<E, K extends string> = E extends { readonly [P in K]: z.ZodType } ? z.input<E[K]> : undefined;

/** What a client passes and gets, derived; nobody types a wire shape twice. */
export type Params<N extends RouteName> = Part<Contract[N], 'params'>;
export type Query<N extends RouteName> = Part<Contract[N], 'query'>;
export type Body<N extends RouteName> = Part<Contract[N], 'body'>;
export type Answer<N extends RouteName> = z.output<Contract[N]['answer']>;
