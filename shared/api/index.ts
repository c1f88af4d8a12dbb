/**
 * The contract between server and client: which endpoints there are, what each takes and gives, who may call it.
 * `ROUTES`, `ACTIONS` and `mayDo` are plain data for every page; `CONTRACT` holds the schemas (zod) and stays out of the reader's page.
 * Opens the other rooms for their types only.
 */
export { type Answer, type Body, CONTRACT, type Contract, type Params, type Query } from './contract.ts';
export * from './designs.ts';
export * from './drafts.ts';
export type { Endpoint, PersonRef } from './endpoint.ts';
export { type Failure, type FieldError, type ProblemBody, problemBody } from './failures.ts';
export { fieldWords } from './field-words.ts';
export * from './people.ts';
export { ACTIONS, type Action, mayDo, ROLES, type Role } from './permissions.ts';
export * from './recipes.ts';
export { AUTH_ROUTES, LINK_PATHS, RELEASE_HEADER, ROUTES, type RouteName, type RouteRow } from './routes.ts';
export * from './team.ts';
export { SIGN_OFF_TICKS } from './ticks.ts';
