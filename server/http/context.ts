import type { Logger } from 'pino';
import type * as z from 'zod';
import type { ACTIONS, Answer, CONTRACT, Failure, ROUTES, Role, RouteName } from '#api';
import type { Compiled, CompileFacts } from '#recipe';
import type { Result } from '#text';
import type { Db } from '../database/open.ts';
import type { Ids } from './ids.ts';

/** Who sends a request. Deactivated people are nobody. */
export interface Person {
  readonly id: string;
  readonly name: string;
  readonly email: string;
  readonly role: Role;
}

/** What every act may need of the running server. */
export interface Settings {
  /** The address people are meant to use, without a closing slash. */
  readonly publicUrl: string;
  readonly release: string;
  /** Key material of this installation: derive from it, never send or store it. */
  readonly secret: string;
}

/** What one call of a service works with. Nothing else comes in: no request, no response, no clock of its own. */
export interface Context {
  /**
   * In changing routes (all but GET) a transaction opened by the frame: it commits when the service answers `ok`, and is rolled back when it
   * answers a failure or throws (`drafts.saveText` commits its failures too: they keep the text). In GET routes the database itself.
   */
  readonly db: Db;
  readonly person: Person | null;
  readonly now: Date;
  /** Network address of the sender; empty for the server's own commands. */
  readonly address: string;
  readonly ids: Ids;
  readonly settings: Settings;
  /**
   * Compiles in a worker thread; never throws for a text. A text that takes longer than the limit gives no document and one diagnostic
   * `too-slow`. Answers are kept by text and facts, so asking again is free: compile in `before` (see `ServiceRow`), outside the transaction.
   */
  readonly compile: (text: string, facts: CompileFacts) => Promise<Compiled>;
  /** Runs an act once the transaction has committed, such as forgetting a cached session; never when it was rolled back. */
  readonly afterCommit: (act: () => void) => void;
  /** Forgets what the session cache knows of a person; call it through `afterCommit`. */
  readonly forgetSessions: (personId: string) => void;
  readonly log: Logger;
}

/** A context of somebody signed in: what services behind any gate but `anyone` receive. */
export interface SignedInContext extends Context {
  readonly person: Person;
}

type Parsed<N extends RouteName, Part extends string> = (typeof CONTRACT)[N] extends { readonly [P in Part]: infer S }
  ? S extends z.ZodType
    ? z.output<S>
    : unknown
  : unknown;

/** Params, query and body of an endpoint, parsed and put together in one object. */
export type Input<N extends RouteName> = Parsed<N, 'params'> & Parsed<N, 'query'> & Parsed<N, 'body'>;

/** The endpoints whose gate is `anyone`. */
export type OpenRouteName = {
  [N in RouteName]: (typeof ACTIONS)[(typeof ROUTES)[N]['action']] extends 'anyone' ? N : never;
}[RouteName];
export type ContextOf<N extends RouteName> = N extends OpenRouteName ? Context : SignedInContext;

/** An act of the program: rules and SQL, no HTTP. */
export type Service<N extends RouteName> = (
  context: ContextOf<N>,
  input: Input<N>,
) => Promise<Result<Answer<N>, Failure>>;

/** How `server/routes.ts` names a service. */
export interface ServiceRow<N extends RouteName> {
  readonly act: Service<N>;
  /** Runs before the transaction opens and may read, not write: a place to compile, so that nobody else waits for it. */
  readonly before?: (context: ContextOf<N>, input: Input<N>) => Promise<void>;
  /** Commits what a failing act wrote: the save protocol stores the text that it refuses. */
  readonly keepsFailures?: true;
  /** The answer holds a link: what is stored for a repeated request is encrypted. */
  readonly sealsAnswer?: true;
}
