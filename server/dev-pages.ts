import { readFileSync } from 'node:fs';
import type { Server } from 'node:http';
import { join } from 'node:path';
import { fillPage, type Pages } from './http/pages.ts';

/** Serves the sources through Vite with hot reload, on the same server and in the same process. */
export async function developedPages(root: string, http: Server, release: string): Promise<Pages> {
  // A development dependency: the built server never comes here.
  const { createServer } = await import('vite');
  const vite = await createServer({ root, server: { middlewareMode: true, hmr: { server: http } }, appType: 'custom' });
  return {
    mount(app) {
      app.use(vite.middlewares);
      app.get('/{*path}', async function page(req, res) {
        const html = await vite.transformIndexHtml(req.originalUrl, readFileSync(join(root, 'index.html'), 'utf8'));
        res
          .set('Cache-Control', 'no-store')
          .type('html')
          .send(fillPage(html, '', release));
      });
    },
  };
}
