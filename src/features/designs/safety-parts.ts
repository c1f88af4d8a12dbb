import type { BodyNode, RecipeDocument } from '#recipe';

/** Notes that belong on the bench and beside the board; they go with every design. */
const BENCH_NOTES: ReadonlySet<unknown> = new Set(['layout', 'measuring']);

/** The document with nothing but its cautions on the page. */
export function cautionsOf(document: RecipeDocument): RecipeDocument {
  return { ...document, body: picked(document.body, (tag) => tag === 'recipe-caution') };
}

/** The document with nothing but its notes on layout and measuring on the page. */
export function benchNotesOf(document: RecipeDocument): RecipeDocument {
  return {
    ...document,
    body: picked(document.body, (tag, kind) => tag === 'recipe-note' && BENCH_NOTES.has(kind)),
  };
}

function picked(nodes: readonly BodyNode[], isWanted: (tag: string, kind: unknown) => boolean): readonly BodyNode[] {
  return nodes.flatMap((node) => {
    if (node.type === 'text') return [];
    return isWanted(node.tagName, node.properties.kind) ? [node] : picked(node.children, isWanted);
  });
}
