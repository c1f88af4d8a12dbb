import { type Dimension, NONE, powerOfDimension, sameDimension, timesDimension } from './dimension.ts';
import { KINDS, type QuantityKind } from './kinds.ts';
import { readUnit } from './units.ts';

/**
 * Gives the quantity that a dimension stands for: the first choice (a dimensionless number is a ratio, kelvins are a
 * difference), or the one that the unit asked for points to (`°` an angle, `°C` a temperature).
 * When it cannot: null, for a dimension that no quantity has.
 */
export function kindOfDimension(d: Dimension, unit = ''): QuantityKind | null {
  if (sameDimension(d, NONE)) return readUnit(unit)?.isAngle === true ? 'angle' : 'ratio';
  if (sameDimension(d, KINDS.temperature.dimension)) return unit === '°C' ? 'temperature' : 'temperature-difference';
  for (const kind of Object.keys(KINDS) as QuantityKind[]) {
    if (sameDimension(KINDS[kind].dimension, d)) return kind;
  }
  return null;
}

/** Names a dimension for a message: "voltage", "ratio", "temperature"; or its unit, "V·Ω", where it has no name. */
export function dimensionWords(d: Dimension): string {
  if (sameDimension(d, KINDS.temperature.dimension)) return 'temperature';
  const kind = kindOfDimension(d);
  return kind === null ? coherentUnit(d) : KINDS[kind].words;
}

/** Units that results are made of, with a weight: a lighter product reads better. The last six are the base. */
const DERIVED = [
  { symbol: 'V', dimension: KINDS.voltage.dimension, weight: 1 },
  { symbol: 'Ω', dimension: KINDS.resistance.dimension, weight: 1 },
  { symbol: 'W', dimension: KINDS.power.dimension, weight: 1.5 },
  { symbol: 'F', dimension: KINDS.capacitance.dimension, weight: 2 },
  { symbol: 'H', dimension: KINDS.inductance.dimension, weight: 2 },
  { symbol: 'S', dimension: KINDS.conductance.dimension, weight: 2 },
  { symbol: 'C', dimension: KINDS.charge.dimension, weight: 2.5 },
  { symbol: 'J', dimension: KINDS.energy.dimension, weight: 2.5 },
] as const;

const BASE = [
  { symbol: 'kg', weight: 1.5 },
  { symbol: 'm', weight: 1 },
  { symbol: 's', weight: 1 },
  { symbol: 'A', weight: 1 },
  { symbol: 'K', weight: 1 },
  { symbol: 'dB', weight: 1 },
] as const;

interface Term {
  readonly symbol: string;
  readonly power: number;
}

/**
 * Writes the unit without prefix of any dimension, such as `V`, `V·Ω`, `V²/Hz` or `kg·m/s`; '' for a ratio. `readUnit` reads it back.
 * Cost: some thousand small steps; called while compiling, not while calculating.
 */
export function coherentUnit(d: Dimension): string {
  if (sameDimension(d, NONE)) return '';
  const kind = kindOfDimension(d);
  for (const usual of [...(kind === null ? [] : [KINDS[kind].unit]), 'V²/Hz', 'A²/Hz']) {
    const unit = readUnit(usual);
    if (unit?.factor === 1 && sameDimension(unit.dimension, d)) return usual;
  }
  return spell(withHertz(lightest(d)));
}

/** Tries every product of at most two derived units and whatever base units are left over. */
function lightest(d: Dimension): readonly Term[] {
  const step = d.some((exponent) => exponent % 2 !== 0) ? 0.5 : 1;
  let best: readonly Term[] = baseTerms(d);
  let least = weightOf(best);
  for (const [i, first] of DERIVED.entries()) {
    for (const second of DERIVED.slice(i)) {
      for (let p = -3; p <= 3; p += step) {
        for (let q = first === second ? 0 : -3; q <= (first === second ? 0 : 3); q += step) {
          const rest = without(without(d, first.dimension, p), second.dimension, q);
          if (rest === null) continue;
          const terms = [{ symbol: first.symbol, power: p }, { symbol: second.symbol, power: q }, ...baseTerms(rest)];
          const used = terms.filter((term) => term.power !== 0);
          const weight = weightOf(used);
          if (weight < least) {
            best = used;
            least = weight;
          }
        }
      }
    }
  }
  return best;
}

function without(d: Dimension | null, unit: Dimension, power: number): Dimension | null {
  const taken = powerOfDimension(unit, -power);
  return d === null || taken === null ? null : timesDimension(d, taken);
}

function baseTerms(d: Dimension): readonly Term[] {
  return BASE.map(({ symbol }, i) => ({ symbol, power: (d[i] ?? 0) / 2 })).filter((term) => term.power !== 0);
}

function weightOf(terms: readonly Term[]): number {
  let sum = 0;
  for (const { symbol, power } of terms) {
    const row = [...DERIVED, ...BASE].find((unit) => unit.symbol === symbol);
    sum += 0.25 + (row?.weight ?? 1) * Math.abs(power);
  }
  return sum;
}

/** Seconds read better as hertz under a root (`V/√Hz`), and where else only `s⁻¹` would stand (`Hz/V`). */
function withHertz(terms: readonly Term[]): readonly Term[] {
  const above = terms.some((term) => term.power > 0);
  return terms.map((term) =>
    term.symbol === 's' && (!Number.isInteger(term.power) || (!above && term.power < 0))
      ? { symbol: 'Hz', power: -term.power }
      : term,
  );
}

/** One unit below the line goes after a slash; several take negative powers, as the SI brochure allows no second slash. */
function spell(terms: readonly Term[]): string {
  const factors = terms.flatMap(wholeAndHalf);
  const above = factors.filter((factor) => factor.power > 0);
  const below = factors.filter((factor) => factor.power < 0);
  const [only, ...others] = below;
  if (above.length > 0 && only !== undefined && others.length === 0) {
    return `${above.map(spellTerm).join('·')}/${spellTerm({ ...only, power: -only.power })}`;
  }
  return [...above, ...below].map(spellTerm).join('·');
}

/** A power of 3/2 becomes a whole unit and one under a root: `Hz·√Hz`. */
function wholeAndHalf({ symbol, power }: Term): readonly Term[] {
  const whole = Math.trunc(power);
  return [
    { symbol, power: whole },
    { symbol, power: power - whole },
  ].filter((term) => term.power !== 0);
}

function spellTerm({ symbol, power }: Term): string {
  if (Math.abs(power) === 0.5) return power < 0 ? `√${symbol}⁻¹` : `√${symbol}`;
  if (power === 1) return symbol;
  return symbol + superscript(power);
}

/** Writes a whole number raised: −12 gives `⁻¹²`. */
export function superscript(power: number): string {
  return String(power).replace(/[-\d]/g, (sign) => (sign === '-' ? '⁻' : '⁰¹²³⁴⁵⁶⁷⁸⁹'.charAt(Number(sign))));
}
