import type { CalculatorModel } from '#calculator';
import type { RecipeDocument } from '#recipe';
import type { Db } from '../../server/database/open.ts';
import { openDatabase } from '../../server/database/open.ts';
import { recipe, recipeVersion } from '../../server/database/schema.ts';
import { createRecipeSearch } from '../../server/services/search.ts';
import { modelOf } from '../calculator-model.ts';
import type { Row } from './run.ts';

const RECIPES = 10_000;
const QUERIES = 400;
const BATCH = 250;

/** Words of the trade, the commonest first: the collection draws from the front of each list more often. */
const CIRCUITS =
  'amplifier divider filter buffer follower comparator oscillator regulator mirror integrator differentiator limiter rectifier splitter driver sensor reference summer attenuator detector multiplexer converter snubber charger switch clamp bridge bias supply source'.split(
    ' ',
  );
const KINDS =
  'difference inverting non-inverting low-pass high-pass band-pass summing precision instrumentation current charge transimpedance voltage unity single-supply logarithmic isolated bootstrapped cascaded active passive balanced quasi-resonant synchronous chopper averaging windowed hysteretic programmable buffered'.split(
    ' ',
  );
const PURPOSES =
  'thermocouple photodiode strain-gauge microphone battery motor lamp relay signalling track-circuit loudspeaker headphone converter line coil heater pump pressure humidity tachometer shunt solar dynamo whistle gate turntable boiler axle brake telephone'.split(
    ' ',
  );
const QUALITIES =
  'with gain,on a single supply,for low noise,with offset null,over temperature,for long cables,with overload recovery,at low power,with matched resistors,for mains hum,with soft start,of high impedance,at high frequency,with isolated ground,for slow signals,with self test'.split(
    ',',
  );
const LABELS =
  'Feedback resistor,Output,Supply,Reference,Gain,Input current,Tolerance,Load,Noise density,Bandwidth,Settling time,Cut-off frequency,Common-mode voltage,Rejection,Headroom,Temperature,Quiescent current,Offset,Source resistance,Output resistance,Ripple,Power in the transistor,Time constant,Slew rate,Hysteresis,Threshold,Duty cycle,Loop gain,Phase margin,Charge,Stored energy,Leakage'.split(
    ',',
  );

/** Numbers from 0 to 1 that are the same in every run. Source: D. H. Lehmer's generator with the multiplier 48271 (Park and Miller, 1993). */
function lehmer(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state * 48_271) % 2_147_483_647;
    return state / 2_147_483_647;
  };
}

type Draw = () => number;
/** Squaring favours the front of a list, as a real collection has its common words. */
const pick = (from: readonly string[], draw: Draw): string => from[Math.floor(draw() ** 2 * from.length)] ?? '';

/** A calculator of 20 members as the compiler stores one; each recipe gets labels of its own. */
const CALCULATOR = modelOf({
  givens: Object.fromEntries(
    Array.from({ length: 10 }, (_, i) => [`R${i + 1}`, ['resistance', '10 kΩ', { min: '1 kΩ', max: '1 MΩ' }] as const]),
  ),
  results: Object.fromEntries(Array.from({ length: 9 }, (_, i) => [`ratio${i + 1}`, `R${i + 1} / (R${i + 1} + R10)`])),
  limits: { output: { of: 'ratio1', to: '0.9' } },
});

function calculatorOf(n: number, draw: Draw): CalculatorModel {
  const label = () => `${pick(LABELS, draw)} of the ${pick(CIRCUITS, draw)}`;
  return {
    ...CALCULATOR,
    title: `Numbers ${n % 7}`,
    givens: CALCULATOR.givens.map((given) => ({ ...given, label: label() })),
    results: CALCULATOR.results.map((result) => ({ ...result, label: label() })),
  };
}

const SUMMARIES = [
  'Takes the signal of a PLACE through a WHAT and holds the THING.',
  'A WHAT for the PLACE that gives the THING without a second stage.',
  'Gives the THING from one WHAT, inside the PLACE.',
  'What a WHAT does to the THING when the PLACE is driven hard, and the repair.',
  'Makes a PLACE behave: one WHAT and two resistors set the THING.',
  'Divides, filters and hands on the THING to a PLACE by a WHAT.',
];

function summaryOf(what: string, place: string, thing: string, draw: Draw): string {
  return pick(SUMMARIES, draw).replace('WHAT', what).replace('PLACE', place).replace('THING', thing.toLowerCase());
}

function documentOf(n: number, draw: Draw): RecipeDocument {
  const [kind, circuit, purpose, quality] = [KINDS, CIRCUITS, PURPOSES, QUALITIES].map((from) => pick(from, draw));
  return {
    schema: 1,
    compiler: 1,
    front: {
      title: `${kind} ${circuit} ${quality}, ${purpose} ${n % 97}`,
      slug: `recipe-${n}`,
      summary: summaryOf(`${kind} ${circuit}`, `${purpose} ${quality}`, pick(LABELS, draw), draw),
      hazards: [],
      purpose: `${pick(['take', 'make', 'move', 'filter', 'protect'], draw)} a ${pick(PURPOSES, draw)} ${pick(['signal', 'level', 'current', 'supply'], draw)}`,
      topics: [`${pick(KINDS, draw)} ${circuit}`, pick(QUALITIES, draw)],
      keywords: [
        pick(PURPOSES, draw),
        pick(CIRCUITS, draw),
        `${pick(KINDS, draw)} ${pick(['stage', 'circuit', 'cell', 'front end'], draw)}`,
      ],
      reviewMonths: 24,
      sources: {},
    },
    body: [],
    calculators: [calculatorOf(n, draw)],
    drawings: [],
    headings: ['What it is for', 'How it works', `Building the ${circuit}`].map((text) => ({
      id: text,
      depth: 2,
      text,
    })),
    uses: [],
    checks: [],
    proof: { formulas: 9, provenAgainstDrawing: 0, examples: 0, examplesPassed: 0, examplesFromOutside: 0 },
  };
}

async function fill(db: Db, documents: readonly RecipeDocument[]): Promise<void> {
  for (let from = 0; from < documents.length; from += BATCH) {
    const part = documents.slice(from, from + BATCH);
    const ids = await db
      .insert(recipe)
      .values(part.map(({ front }, i) => ({ slug: front.slug, slugFixed: true, number: `Q-${from + i + 1}` })))
      .returning({ id: recipe.id });
    await db.insert(recipeVersion).values(
      part.map((document, i) => ({
        recipeId: ids[i]?.id ?? '',
        version: 1,
        state: 'published' as const,
        text: '',
        textHash: '',
        document,
        compilerVersion: 1,
        checks: [],
        ticks: [],
        publishedAt: new Date(0),
      })),
    );
  }
}

/** What people type: whole words, their first letters, a word too many, a letter forgotten or two changed about. */
function queriesFor(documents: readonly RecipeDocument[], draw: Draw): string[] {
  return Array.from({ length: QUERIES }, (_, i) => {
    const document = documents[Math.floor(draw() * documents.length)];
    const words = [document?.front.title, document?.front.purpose, document?.front.keywords]
      .join(' ')
      .split(/[^\p{L}\d-]+/u)
      .filter((each) => each.length > 2);
    const word = () => words[Math.floor(draw() * words.length)] ?? '';
    const [first, second, third] = [word(), word(), word()];
    const at = 1 + Math.floor(draw() * Math.max(1, first.length - 2));
    const forms = [
      first.slice(0, 2 + Math.floor(draw() * 3)),
      first,
      `${first} ${second.slice(0, 2)}`,
      `${first} ${second} ${third.slice(0, 4)}`,
      first.slice(0, at) + first.slice(at + 1),
      `${first.slice(0, at)}${first[at + 1] ?? ''}${first[at] ?? ''}${first.slice(at + 2)} ${second}`,
      `q-${1 + Math.floor(draw() * RECIPES)}`,
      `${first} nowhere`,
    ];
    return forms[i % forms.length] ?? '';
  });
}

/** Searches of 10,000 recipes, read from a database in memory as the server reads its own. */
export async function measure(): Promise<readonly Row[]> {
  const draw = lehmer(20_260_302);
  const documents = Array.from({ length: RECIPES }, (_, n) => documentOf(n, draw));
  const opened = await openDatabase();
  await opened.migrate('drizzle');
  await fill(opened.db, documents);
  const search = createRecipeSearch();
  const begun = performance.now();
  await search.build(opened.db);
  const build = performance.now() - begun;

  const times: number[] = [];
  let found = 0;
  for (const query of queriesFor(documents, draw)) {
    const start = performance.now();
    const hits = await search.find(opened.db, query);
    times.push(performance.now() - start);
    if (hits.length > 0) found++;
  }
  await opened.close();
  // One form in eight asks for a word that no recipe holds.
  if (found < QUERIES / 2) throw new Error(`only ${found} of ${QUERIES} searches found anything`);
  times.sort((a, b) => a - b);
  const p95 = times[Math.floor(0.95 * times.length)] ?? Number.NaN;
  return [
    {
      name: `names search at ${RECIPES} recipes, p95 of ${QUERIES}`,
      value: p95,
      unit: 'ms',
      goal: '≤ 40 ms',
      met: p95 <= 40,
    },
    {
      name: `names search at ${RECIPES} recipes, median of ${QUERIES}`,
      value: times[times.length >> 1] ?? Number.NaN,
      unit: 'ms',
      goal: null,
      met: null,
    },
    { name: `reading ${RECIPES} recipes into the names search`, value: build / 1000, unit: 's', goal: null, met: null },
  ];
}
