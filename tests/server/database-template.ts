import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { TestProject } from 'vitest/node';
import { openDatabase } from '../../server/database/open.ts';

/** Migrates one database per run; every worker starts from its image, uncompressed because that loads faster. */
export default async function setup(project: TestProject): Promise<() => void> {
  const folder = mkdtempSync(join(tmpdir(), 'quadrille-template-'));
  const opened = await openDatabase();
  await opened.migrate('drizzle');
  const file = join(folder, 'image.tar');
  writeFileSync(file, await opened.dumpImage());
  await opened.close();
  project.provide('databaseImage', file);
  return () => rmSync(folder, { recursive: true, force: true });
}

declare module 'vitest' {
  export interface ProvidedContext {
    databaseImage: string;
  }
}
