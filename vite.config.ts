import { fileURLToPath } from 'node:url';
import tailwindcss from '@tailwindcss/vite';
import react from '@vitejs/plugin-react';
import { type BuildEnvironmentOptions, defineConfig, type Plugin } from 'vite';

/** The MDX packages' files open with a directive of theirs that means nothing once they are bundled. */
const bundler: NonNullable<BuildEnvironmentOptions['rolldownOptions']> = {
  onLog(level, log, handle) {
    if (log.code !== 'MODULE_LEVEL_DIRECTIVE') handle(level, log);
  },
};

const installed = (path: string) => fileURLToPath(new URL(`./node_modules/${path}`, import.meta.url));

/** Writes beside the manifest what each chunk is made of: packages by name, our own files by path. `tests/build.test.ts` reads it. */
function contentsOfChunks(): Plugin {
  const root = fileURLToPath(new URL('.', import.meta.url));
  const nameOf = (id: string) => {
    const path = id.split('?')[0] ?? id;
    const inPackage = path.split('node_modules/').at(-1) ?? path;
    if (inPackage === path) return path.replace(root, '');
    return inPackage
      .split('/')
      .slice(0, inPackage.startsWith('@') ? 2 : 1)
      .join('/');
  };
  return {
    name: 'contents-of-chunks',
    generateBundle(_, bundle) {
      const contents = Object.values(bundle).flatMap((chunk) => {
        if (chunk.type !== 'chunk') return [];
        const kept = Object.entries(chunk.modules).filter(([, module]) => module.renderedLength > 0);
        return [[chunk.fileName, [...new Set(kept.map(([id]) => nameOf(id)))]] as const];
      });
      const source = JSON.stringify(Object.fromEntries(contents), null, 2);
      this.emitFile({ type: 'asset', fileName: '.vite/contents.json', source });
    },
  };
}

export default defineConfig({
  plugins: [react(), tailwindcss(), contentsOfChunks()],
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
