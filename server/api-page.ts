import * as z from 'zod';
import { ACTIONS, AUTH_ROUTES, CONTRACT, type Endpoint, ROUTES, type RouteName } from '#api';
import { FAILURES, FRAME_PROBLEMS } from './http/problem.ts';

const STYLE = `
body { max-width: 60rem; margin: 2rem auto; padding: 0 1rem; font: 1rem/1.5 system-ui, sans-serif; color-scheme: light dark; }
table { border-collapse: collapse; } td, th { padding: .25rem .75rem; border-bottom: 1px solid; text-align: left; vertical-align: top; }
pre { overflow-x: auto; padding: .75rem; border: 1px solid; } summary { cursor: pointer; }
`;

/** The contract as a page for people: plain HTML without script; its style element carries the nonce. */
export function apiPage(release: string, nonce: string): string {
  const names = Object.keys(ROUTES) as RouteName[];
  return `<!doctype html>
<html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width">
<title>Quadrille: the API</title><style nonce="${nonce}">${STYLE}</style></head>
<body><main>
<h1>The API of Quadrille</h1>
<p>Release ${escapeHtml(release)}. The same as data: <a href="/api/openapi.json">OpenAPI 3.1</a>. Every request but GET needs the header
<code>Origin</code> of this site and a body of <code>application/json</code>; fields that are not named here are refused. A
<code>requestId</code> (16 to 40 letters, digits, - or _) makes a repeat within 24 hours harmless: it gets the first answer.</p>
<h2>Endpoints</h2>
${names.map(endpointSection).join('\n')}
<h2>Signing in</h2>
<ul>${Object.entries(AUTH_ROUTES)
    .map(([path, action]) => `<li><code>POST ${path}</code> (${action})</li>`)
    .join('')}</ul>
<h2>Problems</h2>
<p>Refused requests answer <code>application/problem+json</code> (RFC 9457).</p>
<table><thead><tr><th>code</th><th>status</th><th>title</th></tr></thead><tbody>
${Object.entries({ ...FAILURES, ...FRAME_PROBLEMS })
  .map(
    ([code, row]) => `<tr id="${code}"><td><code>${code}</code></td><td>${row.status}</td><td>${row.title}</td></tr>`,
  )
  .join('\n')}
</tbody></table>
</main></body></html>`;
}

function endpointSection(name: RouteName): string {
  const endpoint: Endpoint = (CONTRACT satisfies Record<RouteName, Endpoint>)[name];
  const { method, path, action } = ROUTES[name];
  const parts = (['params', 'query', 'body', 'answer'] as const).flatMap((part) => {
    const schema = endpoint[part];
    return schema
      ? [`<h4>${part}</h4><pre>${escapeHtml(schemaText(schema, part === 'answer' ? 'output' : 'input'))}</pre>`]
      : [];
  });
  return `<details id="${name}"><summary><code>${method} ${escapeHtml(path)}</code>: ${escapeHtml(endpoint.summary)}</summary>
<p>Needs: ${escapeHtml(action)} (${ACTIONS[action]}).</p>${parts.join('')}</details>`;
}

function schemaText(schema: z.ZodType, io: 'input' | 'output'): string {
  const { $schema: _, ...rest } = z.toJSONSchema(schema, { io, unrepresentable: 'any' });
  return JSON.stringify(rest, null, 2);
}

function escapeHtml(text: string): string {
  return text.replace(/&/g, '&amp;').replace(/</g, '&lt;').replace(/>/g, '&gt;').replace(/"/g, '&quot;');
}
