import type { Me, ReviewPage } from '#api';
import { compareDocuments, compileRecipe } from '#recipe';
import { shuntText } from '../shunt-recipe.ts';

export const REVIEW_ID = '0b9f6f0e-5d0c-4a57-9f6e-3d1f6a0c7b11';
export const AUTHOR = { id: 'person-author', name: 'Aren Tilling' };
export const EDITOR = { id: 'person-editor', name: 'Edda Marsh' };
export const READER = { id: 'person-reader', name: 'Rhea Dallow' };
export const HASH = 'a'.repeat(64);
export const TICKS = [
  'I followed the derivation of each formula',
  'I looked at the hazards and their cautions',
] as const;

export function meAs(person: { readonly id: string; readonly name: string }, role: 'reader' | 'author' | 'editor'): Me {
  return {
    person: { ...person, email: 'someone@railway.example', role },
    team: {
      name: 'Signals and power',
      timeZone: 'UTC',
      allowSelfSignOff: false,
      publicUrl: window.location.origin,
      needsSetUp: false,
    },
    notices: [],
    reviewsWaiting: 1,
    release: '0.1.0',
  };
}

export function draftRow(change: Partial<ReviewPage['review']['draft']> = {}): ReviewPage['review']['draft'] {
  return {
    id: REVIEW_ID,
    title: 'Shunt reading for the works car',
    number: 'Q-001',
    slug: 'shunt-reading',
    state: 'in-review',
    revision: 3,
    from: 1,
    owner: AUTHOR,
    authors: [],
    writtenBy: [AUTHOR],
    updatedAt: '2026-05-12T09:00:00.000Z',
    sentBy: AUTHOR,
    sentAt: '2026-05-12T09:05:00.000Z',
    note: 'The new amplifier has a gain of 25.',
    sentBack: null,
    ...change,
  };
}

const compiled = (text: string) => {
  const { document, checks, diagnostics } = compileRecipe(text, {});
  if (document === null) throw new Error(diagnostics.map((one) => one.message).join('\n'));
  return { document, checks };
};

export const OLD_TEXT = shuntText({ gain: 20 });
export const NEW_TEXT = shuntText({ gain: 25, words: 'A shunt turns current into a very small voltage.' });

/** A review of a change from gain 20 to gain 25, as the server tells it to an editor who wrote none of it. */
export function reviewPage(change: Partial<ReviewPage> = {}): ReviewPage {
  const [old, fresh] = [compiled(OLD_TEXT), compiled(NEW_TEXT)];
  return {
    review: { draft: draftRow(), mayDecide: true, whyNot: null },
    text: NEW_TEXT,
    hash: HASH,
    document: fresh.document,
    diagnostics: [],
    checks: [...fresh.checks],
    base: { version: 1, text: OLD_TEXT, document: old.document },
    numbers: [...compareDocuments(old.document, fresh.document)],
    designs: { seen: [], unchanged: 0, privateCount: 0, privateNewlyBroken: 0 },
    ticks: [...TICKS],
    ...change,
  };
}

/** A design of which a limit would break. */
export const BROKEN_DESIGN: ReviewPage['designs']['seen'][number] = {
  id: '5c3c1c86-7d8e-4f6a-9d15-0f3b5f7d2a01',
  name: 'Car 3, ammeter',
  owner: READER,
  changes: [
    { label: 'Output', before: '2.600 V', after: '3.250 V', newlyBroken: false },
    { label: 'meter range', before: 'within', after: 'exceeded', newlyBroken: true },
  ],
};
