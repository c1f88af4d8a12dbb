import { createElement, type ReactElement, type ReactNode } from 'react';
import type { Layout } from '#formula';
import { assertNever } from '#text';
import { letterParts } from './letter.tsx';

/** A formula as MathML, `of =` before it, with its text for those who do not see it. */
export function FormulaMath({ of, layout, text }: { of: string; layout: Layout; text: string }) {
  const row = element('mrow', {}, drawnName(of), element('mo', {}, '='), drawn(layout));
  return element('math', { display: 'block', 'aria-label': text }, row);
}

/** React draws MathML, but its types name no element of it. */
function element(tag: string, attributes: Readonly<Record<string, string>>, ...children: ReactNode[]): ReactElement {
  return createElement<Readonly<Record<string, string>>>(tag, attributes, ...children);
}

function drawn(layout: Layout): ReactElement {
  switch (layout.kind) {
    case 'number':
      return element('mn', {}, layout.text);
    case 'quantity':
      return element('mrow', {}, element('mn', {}, layout.number), gap(), element('mtext', {}, layout.unit));
    case 'name':
      return drawnName(layout.name);
    case 'value':
      return element('mtext', { className: 'math-value' }, layout.text);
    case 'operator':
      return element('mo', {}, layout.text);
    case 'row':
      return element('mrow', {}, ...inOrder(layout.items));
    case 'fenced':
      return element('mrow', {}, element('mo', {}, layout.open), drawn(layout.of), element('mo', {}, layout.close));
    case 'fraction':
      return element('mfrac', {}, drawn(layout.above), drawn(layout.below));
    case 'root':
      return element('msqrt', {}, drawn(layout.of));
    case 'power':
      return element('msup', {}, drawn(layout.base), drawn(layout.exponent));
    case 'call':
      return drawnCall(layout.name, layout.args);
    default:
      return assertNever(layout);
  }
}

function drawnName(name: string): ReactElement {
  const { base, subscript } = letterParts(name);
  const letter = element('mi', {}, base);
  return subscript === '' ? letter : element('msub', {}, letter, element('mtext', {}, subscript));
}

function drawnCall(name: string, args: readonly Layout[]): ReactElement {
  const separated = args.flatMap((arg, i) => (i === 0 ? [drawn(arg)] : [element('mo', {}, ','), drawn(arg)]));
  return element(
    'mrow',
    {},
    element('mi', { mathvariant: 'normal' }, name.replaceAll('_', ' ')),
    element('mo', {}, '('),
    ...separated,
    element('mo', {}, ')'),
  );
}

function inOrder(items: readonly Layout[]): readonly ReactElement[] {
  return items.map(drawn);
}

function gap(): ReactElement {
  return element('mspace', { width: '0.17em' });
}
