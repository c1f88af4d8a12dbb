import { existsSync, readdirSync, readFileSync } from 'node:fs';
import { dirname, join, relative, resolve } from 'node:path';
import { describe, expect, test } from 'vitest';

/** What each room may open besides itself. What does not stand here is forbidden; type imports count. */
const ROOMS: Readonly<Record<string, readonly string[]>> = {
  'shared/text': [],
  'shared/quantity': ['shared/text'],
  'shared/formula': ['shared/text', 'shared/quantity'],
  'shared/calculator': ['shared/text', 'shared/quantity', 'shared/formula'],
  'shared/recipe': ['shared/text', 'shared/quantity', 'shared/formula', 'shared/calculator'],
  'shared/api': ['shared/text', 'shared/calculator', 'shared/recipe'],
  server: ['shared'],
  'src/ui': ['shared'],
  'src/lib': ['shared'],
  'src/document': ['shared', 'src/ui', 'src/lib'],
  'src/features': ['shared', 'src/ui', 'src/lib', 'src/document'],
  'src/app': ['shared', 'src/ui', 'src/lib', 'src/document', 'src/features'],
  src: ['src/app', 'src/ui', 'src/lib'],
};

/** Packages that read MDX: one file knows them. */
const MDX_PACKAGES = /^(@mdx-js\/|remark-|rehype-|unified$|mdast-|hast-util-from|micromark)/;
const MDX_FILE = 'shared/recipe/parse-mdx.ts';
/** Files that may compile: the server's thread, the browser's worker, the command line; tests are not looked at. */
const COMPILING =
  /^(shared\/recipe\/.*|server\/compile-thread\.ts|server\/commands\/recipe.*\.ts|src\/.*compile.*worker.*\.ts)$/;
/** Longest file in lines. Tables of data may be longer, by name. */
const LONGEST = 400;
const TABLES: ReadonlySet<string> = new Set(['server/database/schema.ts', 'shared/recipe/wording.ts']);

const SOURCE_FOLDERS = ['shared', 'server', 'src'];
const DOORS: Readonly<Record<string, string>> = JSON.parse(readFileSync('package.json', 'utf8')).imports;

interface Import {
  readonly from: string;
  readonly spec: string;
  /** The file it means, from the root; null for a package. */
  readonly file: string | null;
}

function filesUnder(folder: string): readonly string[] {
  return readdirSync(folder, { withFileTypes: true }).flatMap((entry) => {
    const path = join(folder, entry.name);
    if (entry.isDirectory()) return filesUnder(path);
    return /\.(ts|tsx|mjs)$/.test(entry.name) ? [path] : [];
  });
}

/** Static and dynamic imports, re-exports and `new URL('./…', import.meta.url)`. */
const IMPORTS = /(?:\bfrom\s*|\bimport\s*\(\s*|\bimport\s+|\bnew URL\(\s*)(['"])([^'"\n]+)\1/g;

function importsOf(from: string): readonly Import[] {
  const text = readFileSync(from, 'utf8');
  return [...text.matchAll(IMPORTS)].flatMap(([whole, , spec = '']) => {
    if (whole.startsWith('new URL') && !spec.startsWith('.')) return [];
    const target = DOORS[spec] ?? (spec.startsWith('.') ? resolve(dirname(from), spec) : null);
    return [{ from, spec, file: target === null ? null : relative('.', resolve(target)) }];
  });
}

const files = SOURCE_FOLDERS.flatMap(filesUnder);
const imports = files.flatMap(importsOf);

/** The room of a file: the longest name of the table that it lies under; each feature is a room of its own. */
function roomOf(file: string): string {
  const feature = /^src\/features\/[^/]+/.exec(file)?.[0];
  if (feature !== undefined) return feature;
  const rooms = Object.keys(ROOMS).filter((room) => file.startsWith(`${room}/`));
  return rooms.sort((a, b) => b.length - a.length)[0] ?? file;
}

function mayOpen(from: string, to: string): boolean {
  if (from === to) return true;
  const allowed = ROOMS[from.startsWith('src/features/') ? 'src/features' : from] ?? [];
  return allowed.some((room) => to === room || (to.startsWith(`${room}/`) && !(isFeature(from) && isFeature(to))));
}
const isFeature = (room: string) => room.startsWith('src/features/');

/** Files that import each other in a circle, by Tarjan's strongly connected components (SIAM J. Comput. 1, 1972). */
function circles(edges: ReadonlyMap<string, readonly string[]>): readonly (readonly string[])[] {
  const index = new Map<string, number>();
  const low = new Map<string, number>();
  const stack: string[] = [];
  const found: string[][] = [];
  const visit = (node: string) => {
    index.set(node, index.size);
    low.set(node, index.get(node) ?? 0);
    stack.push(node);
    for (const next of edges.get(node) ?? []) {
      if (!index.has(next)) visit(next);
      if (stack.includes(next)) low.set(node, Math.min(low.get(node) ?? 0, low.get(next) ?? 0));
    }
    if (low.get(node) !== index.get(node)) return;
    const circle = stack.splice(stack.indexOf(node));
    if (circle.length > 1 || edges.get(node)?.includes(node)) found.push(circle);
  };
  for (const node of edges.keys()) if (!index.has(node)) visit(node);
  return found;
}

describe('imports', () => {
  test('are seen: the walk finds the files and what they open', () => {
    expect(files.length).toBeGreaterThan(100);
    expect(imports).toContainEqual({ from: 'server/app.ts', spec: '#api', file: 'shared/api/index.ts' });
    expect(imports).toContainEqual({ from: 'server/dev-pages.ts', spec: 'vite', file: null });
  });

  test('lead to files that are there', () => {
    expect(imports.filter(({ file }) => file !== null && !existsSync(file) && !file.startsWith('dist'))).toEqual([]);
  });

  test('follow the table of rooms', () => {
    const forbidden = imports.filter(({ from, file }) => {
      // The build becomes the server, and a style sheet or font is no room.
      if (file === null || file.startsWith('dist') || !/\.(ts|tsx)$/.test(file)) return false;
      return !mayOpen(roomOf(from), roomOf(file));
    });
    expect(forbidden.map(({ from, spec }) => `${from} opens ${spec}`)).toEqual([]);
  });

  test('of another room of shared/ go through its door', () => {
    const deep = imports.filter(({ from, file }) => {
      if (!file?.startsWith('shared/') || roomOf(from) === roomOf(file)) return false;
      return file !== `${roomOf(file)}/index.ts`;
    });
    expect(deep.map(({ from, spec }) => `${from} opens ${spec}`)).toEqual([]);
  });

  test('make no circle', () => {
    const edges = new Map(
      files.map((file) => [
        file,
        importsOf(file).flatMap((one) => (one.file && files.includes(one.file) ? [one.file] : [])),
      ]),
    );
    expect(circles(edges)).toEqual([]);
  });

  test('of MDX packages stand in one file', () => {
    const others = imports.filter(({ from, spec }) => MDX_PACKAGES.test(spec) && from !== MDX_FILE);
    expect(others.map(({ from, spec }) => `${from} opens ${spec}`)).toEqual([]);
  });

  test('of PGlite stand in one file', () => {
    const others = imports.filter(({ from, spec }) => /pglite/.test(spec) && from !== 'server/database/open.ts');
    expect(others.map(({ from, spec }) => `${from} opens ${spec}`)).toEqual([]);
  });
});

describe('shared/', () => {
  const sources = files.filter((file) => file.startsWith('shared/')).map((file) => ({ file, code: codeOf(file) }));

  test('opens no Node module and no page', () => {
    const impure = imports.filter(
      ({ from, spec }) => from.startsWith('shared/') && /^(node:|react|express|drizzle)/.test(spec),
    );
    expect(impure.map(({ from, spec }) => `${from} opens ${spec}`)).toEqual([]);
  });

  test('reads no clock, draws no random number, writes no log', () => {
    const impure =
      /\b(Date\.now|new Date\(\)|Math\.random|performance\.now|console\.|setTimeout|setInterval|process\.env)/;
    expect(sources.filter(({ code }) => impure.test(code)).map(({ file }) => file)).toEqual([]);
  });
});

test('only the compile threads compile', () => {
  const others = files.filter(
    (file) => /\b(compileRecipe|createCompiler)\b/.test(codeOf(file)) && !COMPILING.test(file),
  );
  expect(others).toEqual([]);
});

test('no source file is longer than 400 lines but tables named here', () => {
  const long = files.filter((file) => {
    return !TABLES.has(file) && readFileSync(file, 'utf8').trimEnd().split('\n').length > LONGEST;
  });
  expect(long).toEqual([]);
});

test('no file is a drawer', () => {
  const drawer = /(^|\/)(utils?|helpers?|types|constants|common|misc)(\/|\.tsx?$)/;
  expect(files.filter((file) => drawer.test(file))).toEqual([]);
});

/** A file without its comments. */
function codeOf(file: string): string {
  return readFileSync(file, 'utf8').replace(/\/\*[\s\S]*?\*\/|(^|\s)\/\/.*$/gm, '');
}
