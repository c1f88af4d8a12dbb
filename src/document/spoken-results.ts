import { useEffect, useRef } from 'react';
import { describeLimit, describeOutcome, type Evaluation, type LinkedCalculator } from '#calculator';
import { announce } from '../ui/announce.tsx';
import { brokenUnder, keyResult } from './key-result.ts';
import { notValidWords } from './result-rows.tsx';

/** Quiet before results are spoken, in milliseconds. */
const QUIET_MS = 600;

/** Speaks the key result and newly exceeded limits once nobody types; nothing for a page that has only been opened. */
export function useSpokenResults(linked: LinkedCalculator, evaluation: Evaluation): void {
  const said = useRef<Spoken | null>(null);
  useEffect(() => {
    const now = spoken(linked, evaluation);
    const before = said.current;
    if (before === null) {
      said.current = now;
      return;
    }
    const timer = setTimeout(() => {
      const exceeded = now.exceeded.filter((one) => !before.exceeded.some((old) => old.name === one.name));
      said.current = now;
      const parts = [...(now.key === before.key ? [] : [now.key]), ...exceeded.map((one) => one.words)];
      if (parts.length > 0) announce(parts.join('. '));
    }, QUIET_MS);
    return () => clearTimeout(timer);
  }, [linked, evaluation]);
}

interface Spoken {
  readonly key: string;
  readonly exceeded: readonly { readonly name: string; readonly words: string }[];
}

function spoken({ model }: LinkedCalculator, evaluation: Evaluation): Spoken {
  const key = keyResult(model);
  const outcome = key && evaluation.outcomes[key.name];
  const broken = key ? brokenUnder(evaluation, key.name) : [];
  const words = key && outcome ? `${key.label} ${describeOutcome(outcome, key).words}` : '';
  const exceeded = evaluation.limits.flatMap((limit, i) => {
    const of = model.limits[i];
    if (!of || limit.state !== 'exceeded') return [];
    return [{ name: limit.name, words: `Limit ${limit.name} ${describeLimit(limit, of).words}` }];
  });
  return { key: broken.length > 0 ? `${words}, ${notValidWords(broken)}` : words, exceeded };
}
