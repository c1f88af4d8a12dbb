import express, { type Express, type Request, type RequestHandler } from 'express';
import { ACTIONS, type Failure, mayDo, ROUTES, type RouteName } from '#api';
import type { Result } from '#text';
import type { Context, ContextOf, Input, Person, ServiceRow } from './context.ts';
import { type Caller, type Frame, inTransaction, readingContext } from './frame.ts';
import { parseInput } from './input.ts';
import { sendFailure, sendFrameProblem } from './problem.ts';
import { answerOnce, requester } from './request-answers.ts';

/** Every endpoint's service. */
export type Services = { readonly [N in RouteName]: ServiceRow<N> };

/** Bodies that carry a recipe's text: 400,000 UTF-16 units are at most 1.2 MB of UTF-8, more where JSON escapes them. */
const TEXT_ROUTES: ReadonlySet<RouteName> = new Set(['drafts.saveText', 'drafts.start']);
const TEXT_BODY = '3mb';
const BODY = '1mb';

/** Registers every endpoint of the contract: first gate, body, service, answer. */
export function mountRoutes(app: Express, services: Services, frame: Frame): void {
  for (const name of Object.keys(ROUTES) as RouteName[]) mount(app, name, services, frame);
}

function mount<N extends RouteName>(app: Express, name: N, services: Services, frame: Frame): void {
  const { method, path } = ROUTES[name];
  const row: ServiceRow<N> = services[name];
  const handlers = [gate(name), ...(method === 'GET' ? [] : [readBody(name)]), handle(name, row, frame)];
  switch (method) {
    case 'GET':
      return void app.get(path, handlers);
    case 'POST':
      return void app.post(path, handlers);
    case 'PUT':
      return void app.put(path, handlers);
    default:
      return void app.patch(path, handlers);
  }
}

/** The first gate, before the body is read: the table of actions and roles. */
function gate(name: RouteName): RequestHandler {
  const { action } = ROUTES[name];
  return function firstGate(req, res, next) {
    const refused = refusal(req.person, action);
    if (refused) sendFailure(res, refused);
    else next();
  };
}

/** Tells why a person does not pass the first gate of an action; null for who does. */
export function refusal(person: Person | null, action: keyof typeof ACTIONS): Failure | null {
  if (mayDo(person?.role ?? null, action)) return null;
  if (!person) return { kind: 'not-signed-in' };
  return { kind: 'forbidden', detail: `Your role is ${person.role}, but this needs ${ACTIONS[action]}.` };
}

function readBody(name: RouteName): RequestHandler {
  const json = express.json({ limit: TEXT_ROUTES.has(name) ? TEXT_BODY : BODY, strict: true });
  return function body(req, res, next) {
    if (!req.is('application/json')) return sendFrameProblem(res, 'not-json', 'The body needs to be application/json.');
    json(req, res, next);
  };
}

function handle<N extends RouteName>(name: N, row: ServiceRow<N>, frame: Frame): RequestHandler {
  return async function endpoint(req, res) {
    const parsed = parseInput(name, { params: req.params, query: req.query, body: req.body });
    const result = parsed.ok ? await call(name, row, frame, callerOf(req), parsed.value) : parsed;
    if (result.ok) res.json(result.value);
    else sendFailure(res, result.error);
  };
}

function callerOf(req: Request): Caller {
  return { person: req.person, address: req.ip ?? '', log: req.log };
}

async function call<N extends RouteName>(
  name: N,
  row: ServiceRow<N>,
  frame: Frame,
  caller: Caller,
  values: Readonly<Record<string, unknown>>,
): Promise<Result<unknown, Failure>> {
  // The contract's schemas gave these values, and the gate has seen the person: here types take over.
  const input = values as Input<N>;
  const typed = (context: Context) => context as ContextOf<N>;
  if (ROUTES[name].method === 'GET') return row.act(typed(readingContext(frame, caller)), input);
  if (row.before) await row.before(typed(readingContext(frame, caller)), input);
  const act = (context: Context) => {
    const { requestId } = values;
    if (typeof requestId !== 'string') return row.act(typed(context), input);
    const request = { route: name, requestId, by: requester(context, values), sealed: row.sealsAnswer === true };
    return answerOnce(context, request, () => row.act(typed(context), input));
  };
  return inTransaction(frame, caller, act, row.keepsFailures === true);
}
