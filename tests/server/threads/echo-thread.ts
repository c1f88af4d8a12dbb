import { type Compiled, ELEMENTS } from '#recipe';

let calls = 0;

/** Stands for a compiler that hangs on one text, fills the memory on another, throws on a third, and counts its calls. */
export default function echo({ text }: { text: string }): Compiled {
  calls++;
  if (text === 'hang') for (;;) calls = calls | 0;
  if (text === 'fill') for (const all: string[] = []; ; ) all.push(`${text}${all.length}`.repeat(1000));
  if (text === 'throw') throw new Error('a fault of ours');
  const check = { kind: 'dimensions', title: text, passed: true, detail: String(calls) } as const;
  return { document: null, preview: null, diagnostics: [], checks: Object.keys(ELEMENTS).length > 0 ? [check] : [] };
}
