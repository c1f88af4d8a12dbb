import { useEffect, useState } from 'react';
import { type Cure, findCure, type Inputs } from '#calculator';
import type { CalculatorState } from './use-calculators.ts';

/** A search takes up to 50 ms, so it waits until nobody has typed for this long. Source: common practice, no source. */
const QUIET_MS = 350;

type Cures = ReadonlyMap<string, Cure | null>;
const NONE: Cures = new Map();

/** The nearest cures of the broken and close limits, by the limit's name; empty until they are looked for. */
export function useCures({ linked, shown, evaluation }: CalculatorState): Cures {
  const [found, setFound] = useState<{ readonly values: string; readonly cures: Cures } | null>(null);
  // The numbers, not the object: leaving a field reads all again and changes nothing, and a cure must not go while it is pressed.
  const values = valuesOf(shown);
  const isFound = found?.values === values;
  useEffect(() => {
    if (isFound) return;
    const asking = evaluation.limits.filter(
      ({ state }) => state === 'exceeded' || state === 'close' || state === 'only-nominally' || state === 'no-value',
    );
    if (asking.length === 0) return;
    const timer = setTimeout(() => {
      const cures = new Map(asking.map(({ name }) => [name, findCure(linked, shown, name)]));
      setFound({ values, cures });
    }, QUIET_MS);
    return () => clearTimeout(timer);
  }, [linked, shown, evaluation, values, isFound]);
  return isFound ? found.cures : NONE;
}

function valuesOf({ fields }: Inputs): string {
  return [...fields.values()]
    .map((field) =>
      field.state === 'read' ? `${field.name} ${field.low} ${field.high}` : `${field.name} ${field.state}`,
    )
    .join(';');
}
