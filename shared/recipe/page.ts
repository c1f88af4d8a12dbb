import type { Diagnostic, Span } from '#text';
import { blocksFromTags, type ElementBlock, readBlocks } from './blocks.ts';
import { type Body, writeBody } from './body.ts';
import { checkLimits, LIMITS } from './limits.ts';
import { editBetween, moved } from './moved.ts';
import type { MdxReader } from './parse-mdx.ts';
import { collectProblems } from './problems.ts';
import type { AttributeText } from './scan-tags.ts';
import { scanTags } from './scan-tags.ts';

/** What one reading of the text by the MDX packages gave. */
export interface PageRead {
  /** Null where MDX could not read the text. */
  readonly body: Body | null;
  /** The page's own elements; where MDX could not read it, those that a scan for tags found. */
  readonly elements: readonly ElementBlock[];
  readonly diagnostics: readonly Diagnostic[];
}

export function readPage(text: string, readMdx: MdxReader): PageRead {
  const problems = collectProblems();
  const scan = scanTags(text);
  const mayRead = checkLimits(text, scan, problems);
  const tree = mayRead ? readMdx(text, scan, problems) : null;
  if (tree === null) return { body: null, elements: blocksFromTags(scan.tags), diagnostics: problems.list };
  const body = writeBody(readBlocks(tree, text, problems), problems);
  return { body, elements: body.elements, diagnostics: problems.list };
}

/**
 * Gives the page again where nothing has changed, and after a change that lies inside one attribute of an element inside a calculator: its structure is the
 * same, only places move. Null for any other change, and where the new value could end the attribute or hold an entity.
 */
export function rereadPage(before: string, after: string, page: PageRead): PageRead | null {
  if (before === after) return page;
  if (page.body === null || after.length > LIMITS.characters) return null;
  const edit = editBetween(before, after);
  const attribute = attributeAround(page.elements, edit);
  if (attribute === null) return null;
  const value: Span = { start: attribute.value.start, end: attribute.value.end + edit.delta };
  const text = after.slice(value.start, value.end);
  if (/["'&\r\n]/.test(text) || attribute.text !== before.slice(attribute.value.start, attribute.value.end))
    return null;
  const lineStart = Math.max(after.lastIndexOf('\n', value.start), after.lastIndexOf('\r', value.start));
  // A longer line might meet the limits of a line, which are counted elsewhere.
  if (!/[\r\n]/.test(after.slice(value.end, lineStart + LIMITS.brackets))) return null;
  return moved(page, edit, (object) => (object === attribute ? { text } : null));
}

function attributeAround(
  elements: readonly ElementBlock[],
  { start, end }: { readonly start: number; readonly end: number },
): AttributeText | null {
  const holds = (span: Span) => span.start <= start && end <= span.end;
  const calculator = elements.find((element) => element.name === 'Calculator' && holds(element.span));
  let element: ElementBlock | undefined = calculator?.elements.find((inner) => holds(inner.span));
  while (element !== undefined) {
    const attribute = element.attributes.find(({ value }) => holds(value));
    if (attribute !== undefined) return attribute;
    element = element.elements.find((inner) => holds(inner.span));
  }
  return null;
}
