import { defineLanguageFacet, HighlightStyle, Language, syntaxHighlighting } from '@codemirror/language';
import type { Extension } from '@codemirror/state';
import { tags } from '@lezer/highlight';
import { type BlockContext, parser as commonMark, GFM, type Line, type MarkdownConfig } from '@lezer/markdown';

/** Front matter and display maths: without these the rules of Markdown would take their lines for headings. */
const recipeBlocks: MarkdownConfig = {
  defineNodes: [
    { name: 'FrontMatter', block: true, style: tags.meta },
    { name: 'DisplayMath', block: true, style: tags.special(tags.string) },
  ],
  parseBlock: [
    {
      name: 'FrontMatter',
      before: 'HorizontalRule',
      parse: (cx, line) => fenced(cx, line, 'FrontMatter', '---', true),
    },
    { name: 'DisplayMath', before: 'FrontMatter', parse: (cx, line) => fenced(cx, line, 'DisplayMath', '$$', false) },
  ],
  // Elements are coloured by their own scan; indented lines are their attributes and never code.
  remove: ['IndentedCode', 'HTMLBlock', 'SetextHeading'],
};

function fenced(cx: BlockContext, line: Line, name: string, fence: string, atStart: boolean): boolean {
  if (line.text.trim() !== fence || (atStart && cx.lineStart !== 0)) return false;
  const from = cx.lineStart;
  while (cx.nextLine()) {
    if (line.text.trim() !== fence) continue;
    cx.nextLine();
    break;
  }
  cx.addElement(cx.elt(name, from, cx.prevLineEnd()));
  return true;
}

const style = HighlightStyle.define([
  { tag: tags.heading, class: 'src-heading' },
  { tag: tags.emphasis, class: 'src-emphasis' },
  { tag: tags.strong, class: 'src-strong' },
  { tag: [tags.monospace, tags.special(tags.string)], class: 'src-quiet' },
  { tag: [tags.link, tags.url], class: 'src-quiet' },
  { tag: tags.meta, class: 'src-quiet' },
]);

/** Markdown as recipes use it, without the grammars of other languages that the ready-made package brings along. */
export function recipeLanguage(): Extension {
  const facet = defineLanguageFacet({ commentTokens: { block: { open: '{/*', close: '*/}' } } });
  const language = new Language(facet, commonMark.configure([GFM, recipeBlocks]), [], 'recipe');
  return [language.extension, syntaxHighlighting(style)];
}
