import type { Upstream } from './inputs.ts';
import { isBroken } from './limit-state.ts';
import type { Sample } from './outcome.ts';

/** What an earlier calculator has for a `from`. */
export type UpstreamValue =
  | { readonly state: 'read'; readonly low: number; readonly high: number; readonly notValid: readonly string[] }
  | { readonly state: 'missing'; readonly because: string };

/**
 * Reads a given or a result of an earlier calculator, over its ranges.
 * When it cannot: null if that calculator was not handed over, `missing` if it has no finite number everywhere.
 */
export function readUpstream(
  from: { readonly calculator: string; readonly name: string },
  upstream: Upstream,
): UpstreamValue | null {
  const above = Object.hasOwn(upstream, from.calculator) ? upstream[from.calculator] : undefined;
  if (!above) return null;
  const { linked, inputs, evaluation } = above;
  const { title } = linked.model;
  const broken = evaluation.limits.filter(isBroken).map((limit) => limit.name);
  const field = inputs.fields.get(from.name);
  if (field) {
    if (field.state !== 'read') return missing(`${from.name} of “${title}” has no value`);
    const standingOn = linked.limits.filter(({ model, inputs: names }) => {
      return broken.includes(model.name) && names.includes(from.name);
    });
    const names = standingOn.map(({ model }) => `${title}: ${model.name}`);
    return { state: 'read', low: field.low, high: field.high, notValid: [...field.notValid, ...names] };
  }
  const outcome = Object.hasOwn(evaluation.outcomes, from.name) ? evaluation.outcomes[from.name] : undefined;
  if (outcome?.state !== 'known') return missing(`${from.name} of “${title}” is waiting`);
  const ends: readonly Sample[] = outcome.over ? [outcome.over.lowest, outcome.over.highest] : [outcome.middle];
  const [low, high = low] = ends.flatMap((end) => (end.kind === 'finite' ? [end.si] : []));
  const isWhole = ends.every((end) => end.kind === 'finite') && (outcome.over?.everywhere ?? true);
  if (low === undefined || high === undefined || !isWhole) {
    return missing(`${from.name} of “${title}” has no finite value everywhere`);
  }
  const notValid = Object.hasOwn(evaluation.notValid, from.name) ? (evaluation.notValid[from.name] ?? []) : [];
  // Names that are not its own came from a calculator above it and carry that one's title already.
  const own = new Set(linked.limits.map(({ model }) => model.name));
  return { state: 'read', low, high, notValid: notValid.map((name) => (own.has(name) ? `${title}: ${name}` : name)) };
}

function missing(because: string): UpstreamValue {
  return { state: 'missing', because };
}
