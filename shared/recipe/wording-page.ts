import type { Wording } from '#text';
import { didYouMean, list, oneOf } from './word-lists.ts';

/** The sentence and the hint of every code about the page: limits, MDX, elements, links, front matter. */
export const PAGE_WORDING = {
  'text-too-long': {
    message: (f) => `The text is longer than the ${f.most} characters that a recipe may have.`,
    hint: () => 'Split it into two recipes that link to each other.',
  },
  'byte-order-mark': {
    message: () => 'The text starts with an invisible mark (U+FEFF), but it needs to start with ---.',
    hint: () => 'Save it as UTF-8 without a byte order mark.',
  },
  'line-too-long': {
    message: (f) => `This line has ${f.length} characters, but at most ${f.most} are read.`,
    hint: () => 'Break it into several lines.',
  },
  'too-many-markers': {
    message: (f) => `This line starts with ${f.found} list or quotation marks, but at most ${f.most} may stand.`,
  },
  'too-many-brackets': {
    message: (f) => `This line holds ${f.found} brackets, but at most ${f.most} may stand in one line.`,
  },
  'too-many-braces': {
    message: (f) => `More than ${f.most} braces stand outside of maths and code.`,
    hint: () => 'Write \\{ and \\} for braces in the text.',
  },
  'too-many-marks': {
    message: () => 'Up to here the text holds more signs of Markdown than can be read in good time.',
    hint: () => 'Break it with blank lines, or use fewer lists and tables.',
  },
  'too-many-blocks': {
    message: (f) => `A recipe may hold ${f.most} paragraphs; this is one more.`,
  },
  'nesting-too-deep': {
    message: (f) => `This is nested deeper than ${f.most} levels.`,
  },
  'too-many-elements': {
    message: (f) => `A recipe may hold ${f.most} elements; this is one more.`,
  },
  'too-many-formulas': {
    message: (f) => `A recipe may hold ${f.most} formulas; this is one more.`,
  },
  'page-too-complex': {
    message: () => 'The page is nested too deeply to be read.',
    hint: () => 'Take out nested brackets, lists and elements.',
  },
  'page-too-large': {
    message: () => 'The page is too large once it is drawn: its maths or tables grow to millions of characters.',
  },
  'maths-too-long': {
    message: (f) => `This formula is longer than ${f.most} characters.`,
    hint: () => 'Split it into several.',
  },
  'maths-syntax': {
    message: (f) => `The maths cannot be read: ${f.reason}.`,
  },
  'mdx-syntax': {
    message: (f) => `The page cannot be read here: ${f.reason}.`,
  },
  'less-than-sign': {
    message: (f) => `Unexpected “${f.found}”: a < begins an element, but no name follows.`,
    hint: () => 'Put a space after <, or write &lt;.',
  },
  'html-comment': {
    message: () => 'Unexpected “<!--”, expected a comment in braces.',
    hint: () => 'Write {/* … */}.',
  },
  'pointed-link': {
    message: () => 'A link in pointed brackets is not read.',
    hint: () => 'Write [words](https://…), or the address alone.',
  },
  'open-brace': {
    message: () => 'This { is never closed, and braces in the text stand for comments only.',
    hint: () => 'Write \\{ for a brace.',
  },
  expression: {
    message: () => 'Braces hold comments only; a recipe has no expressions.',
    hint: () => 'Write \\{ for a brace, $…$ for maths, or <Value of="…"/> for a live number.',
  },
  'import-export': {
    message: (f) => `A recipe is not a program: a paragraph that starts with “${f.word}” is not read.`,
    hint: () => 'Begin it with another word.',
  },
  'unclosed-element': {
    message: (f) => `<${f.name}> is never closed.`,
    hint: (f) => `Write </${f.name}> where it ends, or <${f.name} … /> if it holds nothing.`,
  },
  'element-across-blocks': {
    message: (f) => `<${f.name}> begins in a paragraph and does not end in it.`,
    hint: (f) => `Put <${f.name}> and </${f.name}> on lines of their own.`,
  },
  'closing-tag-mismatch': {
    message: (f) => `Unexpected </${f.found}>, expected </${f.expected}>.`,
  },
  'closing-tag-apart': {
    message: (f) => `</${f.name}> does not stand where its element began.`,
    hint: () => 'Put both tags on lines of their own.',
  },
  'closing-tag-alone': {
    message: (f) => `</${f.name}> closes nothing: no <${f.name}> is open here.`,
  },
  'unfinished-tag': {
    message: (f) => `<${f.name} has no end: a quote or > is missing.`,
  },
  'tag-syntax': {
    message: (f) => `Unexpected “${f.found}” in <${f.name}>, expected an attribute such as name="…", or >.`,
  },
  'attribute-unquoted': {
    message: (f) =>
      `Unexpected ${f.found === '' ? 'end' : `“${f.found}”`}, expected a straight quote before the value.`,
    hint: () => 'Write name="value".',
  },
  'attribute-without-value': {
    message: (f) => `The attribute ${f.name} has no value.`,
    hint: (f) => `Write ${f.name}="…".`,
  },
  'attribute-expression': {
    message: (f) =>
      `${f.name === '' ? 'An attribute' : `The attribute ${f.name}`} is in braces, but attributes are quoted text.`,
    hint: () => 'Write name="value".',
  },
  'spread-attribute': {
    message: () => 'Attributes cannot be spread from a script.',
    hint: () => 'Write each as name="value".',
  },
  'attribute-over-lines': {
    message: (f) => `The value of ${f.name} runs over several lines of a quotation.`,
    hint: () => 'Write it on one line.',
  },
  fragment: {
    message: () => 'Unexpected <>, expected an element with a name.',
  },
  'html-element': {
    message: (f) => `<${f.name}> is HTML, which a recipe does not hold.`,
    hint: () => 'Use Markdown, or write &lt; for the sign.',
  },
  'member-element': {
    message: (f) => `<${f.name}> is not an element of a recipe.`,
  },
  'unknown-element': {
    message: (f) => `There is no element <${f.name}>.`,
    hint: (f) => (f.near === '' ? undefined : `Did you mean <${f.near}>?`),
  },
  'unknown-attribute': {
    message: (f) => `<${f.element}> has no attribute ${f.name}.`,
    hint: (f) => (f.near === '' ? undefined : `Did you mean ${f.near}?`),
  },
  'duplicate-attribute': {
    message: (f) => `The attribute ${f.name} stands twice.`,
  },
  'missing-attribute': {
    message: (f) => `<${f.element}> needs ${list(f.names)}.`,
  },
  'attribute-empty': {
    message: (f) => `The attribute ${f.name} is empty.`,
    hint: () => 'Write a value, or leave the attribute out if it is not needed.',
  },
  'attribute-too-long': {
    message: (f) => `The attribute ${f.name} is longer than ${f.most} characters.`,
  },
  'unknown-word': {
    message: (f) => `Unexpected “${f.found}” for ${f.name}.`,
    hint: (f) => didYouMean(f.near, f.words),
  },
  'whole-number': {
    message: (f) => `${f.name} is “${f.found}”, but needs a whole number from ${f.least} to ${f.most}.`,
  },
  'misplaced-element': {
    message: (f) =>
      f.inside === 'page' || f.inside === 'text'
        ? `<${f.name}> stands inside another element, but belongs on the page.`
        : `<${f.name}> belongs inside <${f.inside}>.`,
  },
  'element-needs-lines': {
    message: (f) =>
      `<${f.name}> stands ${f.stands === 'text' ? 'in a sentence' : 'inside something else'}, but needs lines of its own on the page.`,
  },
  'nothing-inside': {
    message: (f) => `<${f.name}> holds something, but nothing may stand in it.`,
    hint: (f) => `Write <${f.name} … />.`,
  },
  'unexpected-text': {
    message: (f) => `Words cannot stand directly in <${f.name}>.`,
    hint: (f) =>
      `Move them before or after it, or write a comment: {/* … */}.${f.name === 'Calculator' ? ' A remark on one value goes into its note.' : ''}`,
  },
  'empty-element': {
    message: (f) => `<${f.name}> holds no words.`,
  },
  'link-refused': {
    message: (f) => `The link to “${f.href}” may not stand in a recipe.`,
    hint: () => 'Links start with https://, mailto: or # (this page); other recipes are linked by <Recipe slug="…"/>.',
  },
  'link-target-missing': {
    message: (f) => `No heading of this page has the name “${f.id}”.`,
    hint: (f) => (oneOf(f.known) === '' ? undefined : `There are ${list(f.known)}.`),
  },
  'image-refused': {
    message: () => 'Pictures from elsewhere may not stand in a recipe.',
    hint: () => 'Figures from the uploads come with a later release.',
  },
  'recipe-unknown': {
    message: (f) => `There is no recipe “${f.slug}”.`,
    hint: (f) => (f.near === '' ? undefined : `Did you mean ${f.near}?`),
  },
  'recipe-version-unknown': {
    message: (f) => `The recipe “${f.slug}” has no version ${f.version}.`,
    hint: (f) => `Expected ${oneOf(f.known)}.`,
  },
  'not-checked-here': {
    message: (f) => `Not checked here: ${f.what}.`,
  },
  'not-available-yet': {
    message: (f) => `${f.what} is part of the language, but not available yet in this release.`,
  },
  'front-matter-missing': {
    message: () => 'The text has no front matter, but a recipe needs one.',
    hint: () => 'Start with a line ---, then title, summary, slug and hazards, then a line ---.',
  },
  'front-matter-open': {
    message: () => 'The front matter is never closed.',
    hint: () => 'Write a line --- after the last key.',
  },
  'front-matter-too-long': {
    message: (f) => `The front matter is longer than ${f.most} characters.`,
  },
  'front-matter-syntax': {
    message: (f) => `The front matter cannot be read: ${f.reason}.`,
    hint: () => 'Put words that hold : or # in "quotes".',
  },
  'front-matter-form': {
    message: () => 'The front matter is no list of keys, but needs lines such as title: ….',
  },
  'front-matter-key-unknown': {
    message: (f) => `There is no key ${f.key} in the front matter.`,
    hint: (f) => didYouMean(f.near, f.keys),
  },
  'front-matter-key-twice': {
    message: () => 'This key stands twice.',
  },
  'front-matter-key-missing': {
    message: (f) => `The front matter needs ${list(f.keys)}.`,
  },
  'front-matter-words': {
    message: (f) => `${f.key} needs words on one line.`,
  },
  'front-matter-value-long': {
    message: (f) => `${f.key} has ${f.length} characters, but at most ${f.most} fit.`,
  },
  'front-matter-list': {
    message: (f) => `${f.key} needs a list.`,
    hint: (f) => `Write ${f.key}: [one, another].`,
  },
  'front-matter-list-long': {
    message: (f) => `${f.key} has more than ${f.most} entries.`,
  },
  'front-matter-twice': {
    message: (f) => `“${f.words}” stands twice in this list.`,
  },
  'front-matter-sources': {
    message: () => 'sources needs a name for each source.',
    hint: () => 'Write a line such as handbook: "Title, chapter 3".',
  },
  'source-id': {
    message: (f) => `“${f.id}” is no name for a source: it needs a letter first, then letters, digits, - and _.`,
  },
  'number-form': {
    message: (f) => `The number “${f.number}” needs letters and digits with hyphens between, such as DA-03.`,
  },
  'slug-form': {
    message: (f) => `The slug “${f.slug}” needs 3 to 80 small letters, digits and hyphens.`,
    hint: (f) => (f.write === '' ? undefined : `Write ${f.write}.`),
  },
  'slug-changed': {
    message: (f) => `The slug was fixed as ${f.fixed} when the recipe was first published.`,
    hint: (f) => `Write ${f.fixed}.`,
  },
  'hazard-unknown': {
    message: (f) => `There is no hazard “${f.found}”.`,
    hint: (f) => didYouMean(f.near, f.hazards),
  },
  'hazards-and-none': {
    message: () => 'none stands beside other hazards.',
    hint: () => 'Leave none out.',
  },
  'hazards-empty': {
    message: () => 'The list of hazards is empty.',
    hint: () => 'Write [none] if there is none.',
  },
  'topic-unknown': {
    message: (f) => `“${f.found}” is none of the team’s topics.`,
    hint: (f) => (f.near === '' ? undefined : `Did you mean ${f.near}?`),
  },
} satisfies Record<string, Wording>;
