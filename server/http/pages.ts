import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import express, { type Express } from 'express';
import { sendFailure } from './problem.ts';
import { nonceOf } from './security.ts';

/** How the browser's part is served: from the build, by Vite while developing, or not at all (tests of the server). */
export interface Pages {
  mount(app: Express): void;
}

export const noPages: Pages = { mount: () => undefined };

/** Tells which build this is: the version and a hash of the page that names every asset, so that two builds of one version differ. */
export function releaseOf(version: string, folder: string): string {
  const page = readFileSync(join(folder, 'index.html'));
  return `${version}+${createHash('sha256').update(page).digest('hex').slice(0, 8)}`;
}

/** Puts into a page what its scripts need to know before their first request. */
export function fillPage(html: string, nonce: string, release: string): string {
  const metas = `<meta name="csp-nonce" content="${nonce}"><meta name="release" content="${release}">`;
  return html.replace('</head>', () => `${metas}</head>`);
}

/** Serves a built folder. A missing asset is a problem and never the page; every other address is the page, for the router in it. */
export function builtPages(folder: string, release: string): Pages {
  const html = readFileSync(join(folder, 'index.html'), 'utf8');
  return {
    mount(app) {
      app.use('/assets', express.static(join(folder, 'assets'), { immutable: true, maxAge: '1y', index: false }));
      app.use('/assets', function missingAsset(_req, res) {
        res.set('Cache-Control', 'no-store');
        sendFailure(res, { kind: 'not-found', detail: 'There is no such file in this release.' });
      });
      app.use(express.static(folder, { index: false, maxAge: '1h' }));
      app.get('/{*path}', function page(_req, res) {
        res
          .set('Cache-Control', 'no-store')
          .type('html')
          .send(fillPage(html, nonceOf(res), release));
      });
    },
  };
}
