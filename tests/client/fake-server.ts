import { vi } from 'vitest';

export interface Heard {
  readonly method: string;
  readonly path: string;
  readonly body: unknown;
}

export interface Reply {
  readonly status?: number;
  readonly body?: unknown;
  readonly headers?: Readonly<Record<string, string>>;
}

type Answers = Readonly<Record<string, Reply | ((heard: Heard) => Reply | Promise<Reply>)>>;

/** Puts a server in place of `fetch`: answers by `METHOD /path`, and what it heard. A path it does not know is a failed test. */
export function fakeServer(answers: Answers): readonly Heard[] {
  const heard: Heard[] = [];
  vi.stubGlobal('fetch', async (url: string, init: RequestInit) => {
    const path = url.split('?')[0] ?? url;
    const one = {
      method: init.method ?? 'GET',
      path: url,
      body: typeof init.body === 'string' ? JSON.parse(init.body) : undefined,
    };
    heard.push(one);
    const answer = answers[`${one.method} ${path}`];
    if (answer === undefined) throw new Error(`the fake server has no answer for ${one.method} ${path}`);
    const reply = typeof answer === 'function' ? await answer(one) : answer;
    return new Response(JSON.stringify(reply.body ?? {}), {
      status: reply.status ?? 200,
      headers: { 'content-type': 'application/json', ...reply.headers },
    });
  });
  return heard;
}
