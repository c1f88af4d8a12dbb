import { type ComponentType, createElement, type ReactNode } from 'react';
import type { BodyElement, BodyNode } from '#recipe';

type Value = string | number | boolean;
export type BodyAttributes = Readonly<Record<string, Value>>;
export interface BodyProps {
  readonly attributes: BodyAttributes;
  readonly children?: ReactNode;
}

/** Components by tag name; what has none is drawn as it is. */
export type BodyComponents = Readonly<Record<string, ComponentType<BodyProps>>>;

/**
 * Draws a document's body. Tags and properties come from the compiler's fixed list, so there is nothing to clean here;
 * a package for any tree would cost the reader 9 kB more script than this (brotli). With `withPlaces` every part says
 * where in the text it stands.
 */
export function drawBody(body: readonly BodyNode[], components: BodyComponents, withPlaces: boolean): ReactNode {
  const draw = (node: BodyNode, key: number): ReactNode => {
    if (node.type === 'text') return node.value;
    const attributes = { ...attributesOf(node), ...(withPlaces ? placeOf(node) : {}) };
    const children = (TABLE_PARTS.has(node.tagName) ? node.children.filter(isElement) : node.children).map(draw);
    const component = Object.hasOwn(components, node.tagName) ? components[node.tagName] : undefined;
    // Spread, not handed over as a list: the parts of a page never change places.
    return component
      ? createElement(component, { attributes, key }, ...children)
      : createElement(node.tagName, { ...attributes, key }, ...children);
  };
  return body.map(draw);
}

/** Line ends between rows and cells are no text of theirs. */
const TABLE_PARTS: ReadonlySet<string> = new Set(['table', 'thead', 'tbody', 'tr']);

function isElement(node: BodyNode): boolean {
  return node.type === 'element';
}

function attributesOf({ properties }: BodyElement): BodyAttributes {
  const attributes: Record<string, Value> = {};
  for (const [name, value] of Object.entries(properties)) {
    attributes[attributeName(name)] = typeof value === 'object' ? value.join(' ') : value;
  }
  return attributes;
}

/** HAST's names are React's, but for `data-…` and `aria-…`. */
function attributeName(name: string): string {
  if (/^aria[A-Z]/.test(name)) return `aria-${name.slice(4).toLowerCase()}`;
  if (/^data[A-Z]/.test(name)) return name.replaceAll(/[A-Z]/g, (letter) => `-${letter.toLowerCase()}`);
  return name;
}

function placeOf({ span }: BodyElement): BodyAttributes {
  return span ? { 'data-start': span.start, 'data-end': span.end } : {};
}
