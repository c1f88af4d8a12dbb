import type { ElementBlock } from './blocks.ts';
import type { DrawingModel } from './document.ts';

/** Drawings as they are written; a later release solves them. */
export function drawingsOf(elements: readonly ElementBlock[]): readonly DrawingModel[] {
  return elements
    .filter((element) => element.name === 'Drawing')
    .map((element) => {
      const { id = '', title = '', ...rest } = textsIn(element);
      const parts = element.elements
        .filter((child) => child.name !== 'Wire')
        .map((child) => ({ element: child.name, ...textsIn(child) }));
      return {
        id,
        title,
        ...('calculator' in rest ? { calculator: rest.calculator } : {}),
        parts,
        wires: element.elements.filter((child) => child.name === 'Wire').map(textsIn),
      };
    });
}

function textsIn({ attributes }: ElementBlock): Readonly<Record<string, string>> {
  return Object.fromEntries(attributes.map(({ name, text }) => [name, text]));
}
