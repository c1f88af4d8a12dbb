import { resolve } from 'node:path';
import * as z from 'zod';

/** Names of this machine for itself; the first is the one to be told. */
const LOOPBACK = ['localhost', '127.0.0.1', '::1'] as const;

const variables = z.object({
  PORT: z
    .string()
    .regex(/^\d{1,5}$/)
    .transform(Number)
    .refine((port) => port <= 65_535)
    .default(3000),
  HOST: z.string().min(1).default('127.0.0.1'),
  PUBLIC_URL: z.url({ protocol: /^https?$/ }).optional(),
  QUADRILLE_DATA: z.string().min(1).default('data'),
  QUADRILLE_SECRET: z.string().min(32).optional(),
  LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'silent']).default('info'),
});

const EXPECTED = {
  PORT: 'a port number from 0 to 65535',
  HOST: 'an address of this machine, such as 127.0.0.1 or 0.0.0.0',
  PUBLIC_URL: 'the address people open, such as http://bench.example:3000',
  QUADRILLE_DATA: 'a folder for the data',
  QUADRILLE_SECRET: 'at least 32 characters',
  LOG_LEVEL: 'fatal, error, warn, info, debug or silent',
} satisfies Record<keyof z.input<typeof variables>, string>;

/** Settings, read once at start. */
export interface Env {
  readonly port: number;
  readonly host: string;
  /** The address people are meant to use, without a closing slash. */
  readonly publicUrl: string;
  /** Origins from which changing requests are taken: the public one and, without PUBLIC_URL, the names of this machine's loopback. */
  readonly origins: readonly string[];
  /** Whether a reverse proxy on this machine may name the client's address. */
  readonly behindProxy: boolean;
  readonly dataDirectory: string;
  /** Given by environment instead of the file in the data directory. */
  readonly secret: string | undefined;
  readonly logLevel: z.output<typeof variables>['LOG_LEVEL'];
}

/** A setting that the server cannot start with; the message is one line for the terminal. */
export class StartError extends Error {}

/**
 * Reads the settings from environment variables; an empty variable counts as not set.
 * When it cannot: throws `StartError` with one line that names the variable and what it expects. The value of a secret is never shown.
 */
export function readEnv(source: Readonly<Record<string, string | undefined>>): Env {
  const given = Object.fromEntries(Object.entries(source).filter(([, value]) => value !== undefined && value !== ''));
  const parsed = variables.safeParse(given);
  if (!parsed.success) {
    const name = String(parsed.error.issues[0]?.path[0]) as keyof typeof EXPECTED;
    const value = name === 'QUADRILLE_SECRET' ? '' : ` "${given[name]}"`;
    throw new StartError(`Unexpected ${name}${value}, expected ${EXPECTED[name]}.`);
  }
  const { PORT: port, HOST: host, PUBLIC_URL: url } = parsed.data;
  if (url === undefined && !LOOPBACK.some((name) => name === host)) {
    throw new StartError(
      `HOST is ${host}, but an address other machines can reach needs PUBLIC_URL: ${EXPECTED.PUBLIC_URL}.`,
    );
  }
  return {
    port,
    host,
    ...addresses(url, port),
    dataDirectory: resolve(parsed.data.QUADRILLE_DATA),
    secret: parsed.data.QUADRILLE_SECRET,
    logLevel: parsed.data.LOG_LEVEL,
  };
}

function addresses(url: string | undefined, port: number): Pick<Env, 'publicUrl' | 'origins' | 'behindProxy'> {
  if (url !== undefined) {
    const { origin } = new URL(url);
    return { publicUrl: origin, origins: [origin], behindProxy: true };
  }
  const origins = LOOPBACK.map((name) => `http://${name.includes(':') ? `[${name}]` : name}:${port}`);
  return {
    publicUrl: `http://${LOOPBACK[0]}:${port}`,
    origins,
    behindProxy: false,
  };
}
