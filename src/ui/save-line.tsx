import { useEffect, useRef } from 'react';
import { announce } from './announce.tsx';

export type SaveStanding =
  | { readonly kind: 'kept' }
  | { readonly kind: 'keeping' }
  /** Not yet kept, tried again by itself; `why` is a few words: "no connection". */
  | { readonly kind: 'not-yet'; readonly why: string }
  /** Not kept and not tried again before the next change. */
  | { readonly kind: 'not-kept'; readonly why: string }
  | { readonly kind: 'conflict' };

/** The small line by a text or a calculator. "Kept" is never announced, "not kept" once. */
export function SaveLine({ standing }: { standing: SaveStanding }) {
  const words = savedWords(standing);
  const isTrouble = standing.kind === 'not-yet' || standing.kind === 'not-kept' || standing.kind === 'conflict';
  const wasTrouble = useRef(false);
  useEffect(() => {
    if (isTrouble && !wasTrouble.current) announce(words, 'assertive');
    wasTrouble.current = isTrouble;
  }, [isTrouble, words]);
  const shape = standing.kind === 'kept' ? 'bg-green' : isTrouble ? 'bg-red' : 'bg-edge';
  return (
    <span className={`inline-flex items-center gap-2 text-note ${isTrouble ? 'text-red' : 'text-ink-2'}`}>
      <i aria-hidden="true" className={`inline-block size-2 ${shape}`} />
      {words}
    </span>
  );
}

function savedWords(standing: SaveStanding): string {
  switch (standing.kind) {
    case 'kept':
      return 'kept';
    case 'keeping':
      return 'keeping';
    case 'not-yet':
      return `not yet kept: ${standing.why}`;
    case 'not-kept':
      return `not kept: ${standing.why}`;
    case 'conflict':
      return 'not kept: changed elsewhere';
    default:
      return standing satisfies never;
  }
}
