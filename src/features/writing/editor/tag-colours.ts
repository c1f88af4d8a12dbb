import { type Extension, RangeSetBuilder } from '@codemirror/state';
import { Decoration, type DecorationSet, type EditorView, ViewPlugin, type ViewUpdate } from '@codemirror/view';
import { type FormulaToken, formulaTokens } from '#formula';
import { ELEMENTS, type ElementRow } from '#recipe';
import { span } from '#text';
import { type SourceTag, sourceTags } from './source-tags.ts';

const mark = (name: string) => Decoration.mark({ class: name });

const TAG = mark('src-tag');
const VALUE = mark('src-value');
const TOKENS = {
  number: mark('src-number'),
  unit: mark('src-unit'),
  name: mark('src-name'),
  function: mark('src-function'),
  constant: mark('src-function'),
  operator: mark('src-operator'),
  bracket: mark('src-operator'),
  comma: mark('src-operator'),
  unknown: mark('src-unknown'),
} as const satisfies Record<FormulaToken['kind'], Decoration>;

interface Place {
  readonly from: number;
  readonly to: number;
  readonly mark: Decoration;
}

/** The row of an element by its name as typed; undefined for one that the language lacks. */
export function elementRow(name: string): ElementRow | undefined {
  return Object.entries(ELEMENTS).find(([known]) => known === name)?.[1];
}

/** Where the elements, attributes and formulas of a text are coloured, in order and without overlap. */
export function colouredPlaces(text: string, tags: readonly SourceTag[]): readonly Place[] {
  return tags.flatMap((tag) => placesOf(text, tag));
}

function placesOf(text: string, tag: SourceTag): readonly Place[] {
  const places: Place[] = [{ from: tag.from, to: tag.nameFrom + tag.name.length, mark: TAG }];
  const row = elementRow(tag.name);
  for (const attribute of tag.attributes) {
    const { valueFrom, valueTo } = attribute;
    const isFormula = row?.attributes[attribute.name]?.reader === 'formula';
    if (isFormula) {
      for (const token of formulaTokens(text, span(valueFrom, valueTo))) {
        places.push({ from: token.span.start, to: token.span.end, mark: TOKENS[token.kind] });
      }
    } else if (valueTo > valueFrom) places.push({ from: valueFrom, to: valueTo, mark: VALUE });
  }
  const ending = tag.kind === 'empty' ? 2 : tag.kind === 'unfinished' ? 0 : 1;
  if (ending > 0) places.push({ from: tag.to - ending, to: tag.to, mark: TAG });
  return places;
}

function decorations(view: EditorView, tags: readonly SourceTag[]): DecorationSet {
  const text = view.state.doc.toString();
  const builder = new RangeSetBuilder<Decoration>();
  for (const { from, to } of view.visibleRanges) {
    const shown = tags.filter((tag) => tag.to >= from && tag.from <= to);
    for (const place of colouredPlaces(text, shown)) {
      if (place.from >= from && place.to <= to && place.to > place.from) builder.add(place.from, place.to, place.mark);
    }
  }
  return builder.finish();
}

/** Colours what the recipe language adds to Markdown. Only what is seen is cut into tokens. */
export function tagColours(): Extension {
  return ViewPlugin.fromClass(
    class {
      tags: readonly SourceTag[];
      decorations: DecorationSet;
      constructor(view: EditorView) {
        this.tags = sourceTags(view.state.doc.toString());
        this.decorations = decorations(view, this.tags);
      }
      update(update: ViewUpdate): void {
        if (update.docChanged) this.tags = sourceTags(update.state.doc.toString());
        if (update.docChanged || update.viewportChanged) this.decorations = decorations(update.view, this.tags);
      }
    },
    { decorations: (plugin) => plugin.decorations },
  );
}
