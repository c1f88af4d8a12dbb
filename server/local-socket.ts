import { chmodSync, rmSync } from 'node:fs';
import { createServer, request } from 'node:http';
import { join, relative } from 'node:path';
import * as z from 'zod';
import { fail, ok, type Result } from '#text';

/** Longest path of a local socket in bytes. Source: unix(7), `sun_path` holds 108 with its closing zero. */
const LONGEST_PATH = 107;

/** What the server does for commands on its own machine: a name, and one argument. Failures are sentences for the terminal. */
export type LocalActs = Readonly<Record<'link' | 'backup', (argument: string) => Promise<Result<string, string>>>>;

const ask = z.strictObject({ act: z.enum(['link', 'backup']), argument: z.string().max(4096) });
const answer = z.union([
  z.strictObject({ ok: z.literal(true), value: z.string() }),
  z.strictObject({ ok: z.literal(false), error: z.string() }),
]);
const LARGEST_BYTES = 16_384;

function socketPath(dataDirectory: string): string | null {
  const full = join(dataDirectory, 'socket');
  const path = [full, relative(process.cwd(), full)].sort((a, b) => a.length - b.length)[0] ?? full;
  return Buffer.byteLength(path) <= LONGEST_PATH ? path : null;
}

/**
 * Listens on a socket file in the data directory that only the directory's owner can open (mode 0600). The caller holds the directory's lock,
 * so a file that is already there belongs to nobody. Gives the function that closes it, or null where the path is too long for a socket.
 */
export async function listenLocally(dataDirectory: string, acts: LocalActs): Promise<(() => Promise<void>) | null> {
  const path = socketPath(dataDirectory);
  if (path === null) return null;
  rmSync(path, { force: true });
  const server = createServer(async (req, res) => {
    let text = '';
    for await (const chunk of req.setEncoding('utf8')) {
      text += String(chunk);
      if (text.length > LARGEST_BYTES) return void res.writeHead(413).end();
    }
    const asked = ask.safeParse(parseJson(text)).data;
    const result = asked
      ? await acts[asked.act](asked.argument)
      : fail('The running server does not know this command.');
    res.end(JSON.stringify(result));
  });
  await new Promise<void>((resolve, reject) => server.once('error', reject).listen(path, resolve));
  chmodSync(path, 0o600);
  return () =>
    new Promise((resolve) => {
      server.close(() => resolve());
      server.closeAllConnections();
    });
}

/** Null for what is no JSON: the other side may have ended in the middle of a line. */
function parseJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}

/** Asks the server that holds a data directory. When it cannot be reached: a sentence. */
export async function askServer(
  dataDirectory: string,
  act: keyof LocalActs,
  argument: string,
): Promise<Result<string, string>> {
  const path = socketPath(dataDirectory);
  if (path === null)
    return fail(`${dataDirectory} is too long a path for a local socket. Stop the server and try again.`);
  return new Promise((resolve) => {
    const unreachable = () =>
      resolve(fail('The server that uses this data directory does not answer. Is it starting or stopping?'));
    const call = request({ socketPath: path, method: 'POST' }, async (res) => {
      let text = '';
      for await (const chunk of res.setEncoding('utf8')) text += String(chunk);
      const parsed = answer.safeParse(parseJson(text));
      if (!parsed.success) return unreachable();
      resolve(parsed.data.ok ? ok(parsed.data.value) : fail(parsed.data.error));
    });
    call.once('error', unreachable);
    call.end(JSON.stringify({ act, argument } satisfies z.infer<typeof ask>));
  });
}
