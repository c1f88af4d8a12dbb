import { type Answer, type Body, type Params, type Query, RELEASE_HEADER, ROUTES, type RouteName } from '#api';
import { fail, ok, type Result } from '#text';
import { type ClientFailure, refusalOf, withoutAnswer } from './failure.ts';
import { hearRelease, tellNews } from './server-news.ts';

/** Longest wait for an answer, in milliseconds. Source: common practice, no source. */
const TIMEOUT_MS = 30_000;

type Slot<K extends string, T> = T extends undefined ? { readonly [P in K]?: undefined } : { readonly [P in K]: T };

/** What an endpoint needs: `params`, `query` and `body`, each exactly where the contract names it. */
export type Parts<N extends RouteName> = Slot<'params', Params<N>> & Slot<'query', Query<N>> & Slot<'body', Body<N>>;

export interface Sending {
  readonly signal?: AbortSignal;
  /** The browser finishes the request although the page goes; it takes bodies up to 64 KiB. */
  readonly keepalive?: boolean;
}

interface LooseParts {
  readonly params?: unknown;
  readonly query?: unknown;
  readonly body?: unknown;
}

/** Sends one request of the contract. It never throws; answers are parsed by the contract in development and in tests only. */
export async function request<N extends RouteName>(
  name: N,
  parts: Parts<N>,
  sending: Sending = {},
): Promise<Result<Answer<N>, ClientFailure>> {
  const { method, path } = ROUTES[name];
  const { params, query, body }: LooseParts = parts;
  const sent = await exchange(method, urlOf(path, params, query), body, sending);
  if (!sent.ok) return sent;
  if (import.meta.env.DEV) {
    const problem = await contractProblem(name, sent.value);
    if (problem !== null) {
      console.error(`The answer of ${name} does not follow the contract: ${problem}`);
      return fail(withoutAnswer('unreadable'));
    }
  }
  // The contract says what this endpoint answers; the check above holds it to that where the budget allows.
  return ok(sent.value as Answer<N>);
}

type AuthPath =
  | 'sign-in/email'
  | 'sign-out'
  | 'request-password-reset'
  | 'reset-password'
  | 'change-password'
  | 'revoke-other-sessions';

/** Sends to one of the sign-in library's own paths. */
export function authRequest(
  path: AuthPath,
  body: Readonly<Record<string, unknown>>,
): Promise<Result<unknown, ClientFailure>> {
  return exchange('POST', `/api/auth/${path}`, body, {});
}

async function exchange(
  method: string,
  url: string,
  body: unknown,
  sending: Sending,
): Promise<Result<unknown, ClientFailure>> {
  const stop = new AbortController();
  const timer = setTimeout(() => stop.abort('timeout'), TIMEOUT_MS);
  const abort = () => stop.abort('gone');
  sending.signal?.addEventListener('abort', abort);
  try {
    const response = await fetch(url, {
      method,
      credentials: 'same-origin',
      signal: stop.signal,
      ...(sending.keepalive ? { keepalive: true } : {}),
      ...(body === undefined ? {} : { headers: { 'content-type': 'application/json' }, body: JSON.stringify(body) }),
    });
    return await read(response);
  } catch {
    return fail(withoutAnswer(stop.signal.reason === 'timeout' ? 'timeout' : 'offline'));
  } finally {
    clearTimeout(timer);
    sending.signal?.removeEventListener('abort', abort);
  }
}

async function read(response: Response): Promise<Result<unknown, ClientFailure>> {
  hearRelease(response.headers.get(RELEASE_HEADER));
  const text = await response.text();
  const body = parseJson(text);
  if (!response.ok) {
    const refusal = refusalOf(response.status, body, response.headers);
    if (response.status === 401 && !response.url.includes('/api/auth/')) tellNews({ isSignedOut: true });
    return fail(refusal);
  }
  return body === undefined ? fail(withoutAnswer('unreadable')) : ok(body);
}

function parseJson(text: string): unknown {
  if (text === '') return null;
  try {
    return JSON.parse(text);
  } catch {
    return undefined;
  }
}

function urlOf(path: string, params: unknown, query: unknown): string {
  const filled = path.replaceAll(/:([A-Za-z]+)/g, (_, key: string) => encodeURIComponent(String(valueAt(params, key))));
  const search = new URLSearchParams();
  if (typeof query === 'object' && query !== null) {
    for (const [key, value] of Object.entries(query)) if (value !== undefined) search.set(key, String(value));
  }
  return search.size === 0 ? filled : `${filled}?${search}`;
}

function valueAt(params: unknown, key: string): unknown {
  return typeof params === 'object' && params !== null ? Reflect.get(params, key) : undefined;
}

async function contractProblem(name: RouteName, answer: unknown): Promise<string | null> {
  const { CONTRACT } = await import('#api');
  const parsed = CONTRACT[name].answer.safeParse(answer);
  return parsed.success ? null : parsed.error.message;
}
