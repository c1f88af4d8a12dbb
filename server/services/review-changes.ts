import { and, eq, or } from 'drizzle-orm';
import { type PersonRef, type ReviewPage, SIGN_OFF_TICKS } from '#api';
import type { RecipeDocument } from '#recipe';
import type { Db } from '../database/open.ts';
import { design, recipeVersion, user } from '../database/schema.ts';
import type { Person } from '../http/context.ts';
import { maySeeDesign } from './access.ts';
import { compareWithInputs } from './design-numbers.ts';

/** What a new version would do to the designs of its recipe. */
export type DesignImpact = ReviewPage['designs'];

interface KeptDesign {
  readonly id: string;
  readonly name: string;
  readonly owner: PersonRef;
  readonly visibility: 'team' | 'only me';
  readonly version: number;
  readonly inputs: Readonly<Record<string, Readonly<Record<string, string>>>>;
}

/**
 * Recomputes every design of a recipe with the document that it stays on and with the new one. Those "only me" of others are counted only.
 * Cost: two evaluations a design.
 */
export async function designImpact(
  db: Db,
  person: Person,
  recipeId: string,
  after: RecipeDocument,
): Promise<DesignImpact> {
  const designs = await loadDesigns(db, recipeId);
  const documents = await loadDocuments(db, recipeId, new Set(designs.map((d) => d.version)));
  const seen: DesignImpact['seen'] = [];
  let unchanged = 0;
  let privateCount = 0;
  let privateNewlyBroken = 0;
  for (const one of designs) {
    const before = documents.get(one.version);
    if (before === undefined)
      throw new Error(`design ${one.id} stands on version ${one.version}, which does not exist`);
    const changes = compareWithInputs(before, after, one.inputs);
    const broken = changes.some((change) => change.newlyBroken);
    if (!maySeeDesign(person, { ownerId: one.owner.id, visibility: one.visibility })) {
      if (changes.length > 0) privateCount++;
      if (broken) privateNewlyBroken++;
    } else if (changes.length === 0) unchanged++;
    else seen.push({ id: one.id, name: one.name, owner: one.owner, changes: [...changes] });
  }
  return { seen, unchanged, privateCount, privateNewlyBroken };
}

async function loadDesigns(db: Db, recipeId: string): Promise<readonly KeptDesign[]> {
  const found = await db
    .select({
      id: design.id,
      name: design.name,
      ownerId: design.ownerId,
      ownerName: user.name,
      visibility: design.visibility,
      version: design.version,
      inputs: design.inputs,
    })
    .from(design)
    .innerJoin(user, eq(user.id, design.ownerId))
    .where(eq(design.recipeId, recipeId))
    .orderBy(user.name, design.name, design.id);
  return found.map(({ ownerId, ownerName, ...rest }) => ({ ...rest, owner: { id: ownerId, name: ownerName } }));
}

async function loadDocuments(
  db: Db,
  recipeId: string,
  versions: ReadonlySet<number>,
): Promise<ReadonlyMap<number, RecipeDocument>> {
  if (versions.size === 0) return new Map();
  const found = await db
    .select({ version: recipeVersion.version, document: recipeVersion.document })
    .from(recipeVersion)
    .where(
      and(
        eq(recipeVersion.recipeId, recipeId),
        or(...[...versions].map((version) => eq(recipeVersion.version, version))),
      ),
    );
  return new Map(found.map((row) => [row.version, row.document]));
}

export const TICK_DERIVATION = SIGN_OFF_TICKS.derivation;
export const TICK_HAZARDS = SIGN_OFF_TICKS.hazards;
/** With more broken designs than this, one tick stands for all: a list that nobody reads proves nothing. Common practice, no source. */
const SINGLE_TICKS = 10;
/** Longest tick of the contract. */
const TICK_LENGTH = 200;

/** What the person who decides must tick, in these words. */
export function ticksFor(impact: DesignImpact): readonly string[] {
  const broken = impact.seen.filter((one) => one.changes.some((change) => change.newlyBroken));
  const ticks: string[] = [TICK_DERIVATION, TICK_HAZARDS];
  if (broken.length > SINGLE_TICKS) ticks.push(`I looked at the ${broken.length} designs in which a limit would break`);
  else ticks.push(...broken.map(designTick));
  const hidden = impact.privateNewlyBroken;
  if (hidden > 0)
    ticks.push(`I know that a limit would break in ${hidden} private ${hidden === 1 ? 'design' : 'designs'}`);
  return [...new Set(ticks)];
}

function designTick(one: DesignImpact['seen'][number]): string {
  const tick = (name: string) => `I know that a limit would break in “${name}” of ${one.owner.name}`;
  const room = TICK_LENGTH - tick('').length;
  return tick(one.name.length <= room ? one.name : `${one.name.slice(0, room - 1)}…`);
}
