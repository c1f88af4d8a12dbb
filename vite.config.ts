import { fileURLToPath } from 'node:url';
import tailwindcss from '@tailwindcss/vite';
import react from '@vitejs/plugin-react';
import { type BuildEnvironmentOptions, defineConfig } from 'vite';

/** The MDX packages' files open with a directive of theirs that means nothing once they are bundled. */
const bundler: NonNullable<BuildEnvironmentOptions['rolldownOptions']> = {
  onLog(level, log, handle) {
    if (log.code !== 'MODULE_LEVEL_DIRECTIVE') handle(level, log);
  },
};

const installed = (path: string) => fileURLToPath(new URL(`./node_modules/${path}`, import.meta.url));

export default defineConfig({
  plugins: [react(), tailwindcss()],
  resolve: {
    alias: {
      // Vite would take their "browser" builds, which use document and DOMParser; the compile worker has neither.
      'decode-named-character-reference': installed('decode-named-character-reference/index.js'),
      'hast-util-from-html-isomorphic': installed('hast-util-from-html-isomorphic/index.js'),
    },
    dedupe: ['react', 'react-dom', 'katex'],
  },
  build: {
    outDir: 'dist/web',
    emptyOutDir: true,
    assetsInlineLimit: 0,
    target: 'es2023',
    manifest: true,
    modulePreload: { polyfill: false },
    rolldownOptions: bundler,
  },
  worker: { format: 'es', rolldownOptions: bundler },
  // Found late by Vite, being behind lazy imports and the worker; unlisted, the first visit in development reloads the page.
  optimizeDeps: {
    include: [
      'react-hook-form',
      '@hookform/resolvers/zod',
      'radix-ui',
      'idb-keyval',
      '@codemirror/autocomplete',
      '@codemirror/commands',
      '@codemirror/language',
      '@codemirror/lint',
      '@codemirror/search',
      '@codemirror/state',
      '@codemirror/view',
      '@mdx-js/mdx',
      'remark-frontmatter',
      'remark-gfm',
      'remark-math',
      'rehype-katex',
    ],
  },
});
