import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { brotliCompressSync, constants } from 'node:zlib';
import { describe, expect, test } from 'vitest';
import * as z from 'zod';

/** The build that `npm test` and `npm run build` make; this test only reads it. */
const WEB = 'dist/web';

const manifestForm = z.record(
  z.string(),
  z.object({ file: z.string(), imports: z.array(z.string()).optional(), css: z.array(z.string()).optional() }),
);
const contentsForm = z.record(z.string(), z.array(z.string()));

function read(path: string): unknown {
  const full = join(WEB, path);
  if (!existsSync(full)) throw new Error(`${full} is not there: run \`npm run build\` first`);
  return JSON.parse(readFileSync(full, 'utf8'));
}

/** Files of script that a reader who is signed in loads for a recipe's page: the entry, the page's chunk, and all they import. */
function readerFiles(): ReadonlySet<string> {
  const manifest = manifestForm.parse(read('.vite/manifest.json'));
  const files = new Set<string>();
  const add = (key: string) => {
    const entry = manifest[key];
    if (!entry) throw new Error(`the manifest has no ${key}`);
    if (files.has(entry.file)) return;
    files.add(entry.file);
    for (const imported of entry.imports ?? []) add(imported);
  };
  add('index.html');
  add('src/features/recipes/recipe-page.tsx');
  return files;
}

function readerContents(): readonly string[] {
  const contents = contentsForm.parse(read('.vite/contents.json'));
  return [...new Set([...readerFiles()].flatMap((file) => contents[file] ?? []))];
}

/** Every package on the reader's page, each wanted there. A new one has to be written down here. */
const PACKAGES = [
  /^react$/,
  /^react-dom$/,
  /^scheduler$/,
  /^react-router(-dom)?$/,
  /^@tanstack\/(query-core|react-query)$/,
  /^@radix-ui\//,
  /^radix-ui$/,
  /^@floating-ui\//,
  // What Radix's dialogs and menus stand on.
  /^(aria-hidden|get-nonce|react-remove-scroll|react-remove-scroll-bar|react-style-singleton|use-callback-ref|use-sidecar|tslib)$/,
  /^idb-keyval$/,
];

/** A few lines that join modules carry names that begin with a NUL. */
function isOfTheBundler(name: string): boolean {
  return name.charCodeAt(0) === 0;
}

/** Our own files that read what authors write; a reader's page gets data instead. */
const AUTHORS_ONLY = [
  'shared/formula/parse.ts',
  'shared/formula/tokens.ts',
  'shared/formula/check.ts',
  'shared/recipe/parse-mdx.ts',
  'shared/recipe/compile.ts',
  'shared/api/contract.ts',
];

/** Goal of the bench, in kB of 1000 bytes. */
const LARGEST_SCRIPT_KB = 165;

describe('the script of the reader’s recipe page', () => {
  test('holds React, router, queries and controls, and no other package', () => {
    const packages = readerContents().filter((name) => !/^(?:src|shared)\//.test(name) && !isOfTheBundler(name));
    expect(packages).toContain('react-dom');
    expect(packages.filter((name) => !PACKAGES.some((wanted) => wanted.test(name)))).toEqual([]);
  });

  test('evaluates formulas and never reads one', () => {
    const own = readerContents();
    expect(own).toContain('shared/formula/link.ts');
    expect(own.filter((name) => AUTHORS_ONLY.includes(name))).toEqual([]);
  });

  test(`is at most ${LARGEST_SCRIPT_KB} kB, brotli 11`, () => {
    const quality = { params: { [constants.BROTLI_PARAM_QUALITY]: 11 } };
    const sizes = [...readerFiles()].map((file) => brotliCompressSync(readFileSync(join(WEB, file)), quality).length);
    const kilobytes = sizes.reduce((sum, size) => sum + size, 0) / 1000;
    expect(kilobytes).toBeGreaterThan(50);
    expect(kilobytes).toBeLessThanOrEqual(LARGEST_SCRIPT_KB);
  });
});
