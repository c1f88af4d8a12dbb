import type { Element, ElementContent, Root } from 'hast';
import type { BodyNode } from '#recipe';

/** A document's body as the tree that the drawing package takes; with `withPlaces` every part says where in the text it stands. */
export function hastOf(body: readonly BodyNode[], withPlaces: boolean): Root {
  return { type: 'root', children: body.map((node) => contentOf(node, withPlaces)) };
}

function contentOf(node: BodyNode, withPlaces: boolean): ElementContent {
  if (node.type === 'text') return { type: 'text', value: node.value };
  const properties: Element['properties'] = {};
  for (const [name, value] of Object.entries(node.properties)) {
    properties[name] = typeof value === 'object' ? [...value] : value;
  }
  if (withPlaces && node.span) {
    properties.dataStart = node.span.start;
    properties.dataEnd = node.span.end;
  }
  const children = node.children.map((child) => contentOf(child, withPlaces));
  return { type: 'element', tagName: node.tagName, properties, children };
}
