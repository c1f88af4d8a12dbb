import { closeBrackets, closeBracketsKeymap, completionKeymap } from '@codemirror/autocomplete';
import { defaultKeymap, history, historyKeymap } from '@codemirror/commands';
import { bracketMatching, indentService } from '@codemirror/language';
import { type Diagnostic, lintGutter, setDiagnostics } from '@codemirror/lint';
import { highlightSelectionMatches, searchKeymap } from '@codemirror/search';
import { Annotation, EditorState, type Extension, Prec, Transaction } from '@codemirror/state';
import {
  drawSelection,
  EditorView,
  highlightActiveLine,
  highlightActiveLineGutter,
  keymap,
  lineNumbers,
} from '@codemirror/view';
import type { ShownDiagnostic } from '#text';
import { recipeCompletion } from './completion.ts';
import { recipeLanguage } from './recipe-language.ts';
import { tagColours } from './tag-colours.ts';
import { editorTheme } from './theme.ts';

export interface EditorSettings {
  readonly parent: HTMLElement;
  readonly text: string;
  readonly label: string;
  readonly isReadOnly: boolean;
  /** A person changed the text. */
  readonly onText: (text: string) => void;
  /** The cursor stands elsewhere. Offset into the text. */
  readonly onCursor: (offset: number) => void;
}

/** What the page asks of the editor. Offsets are UTF-16 units of the text. */
export interface MountedEditor {
  readonly show: (diagnostics: readonly ShownDiagnostic[]) => void;
  readonly goTo: (start: number, end?: number) => void;
  /** Puts another text in place of this one. As an edit it can be undone and is saved; else it came from the server. */
  readonly replace: (text: string, asEdit: boolean) => void;
  readonly text: () => string;
  readonly focus: () => void;
  readonly destroy: () => void;
}

const fromServer = Annotation.define<true>();

/** Builds the editor. Tab is left to the browser; line ends become LF, as the editor counts them. */
export function mountEditor(settings: EditorSettings): MountedEditor {
  let diagnostics: readonly ShownDiagnostic[] = [];
  const goToProblem = (step: 1 | -1) => () => {
    const next = nextProblem(diagnostics, view.state.selection.main.head, step);
    if (next === null) return false;
    goTo(next.start.offset);
    return true;
  };
  const goTo = (start: number, end = start) => {
    const length = view.state.doc.length;
    view.dispatch({
      selection: { anchor: Math.min(start, length), head: Math.min(end, length) },
      effects: EditorView.scrollIntoView(Math.min(start, length), { y: 'center' }),
    });
    view.focus();
  };
  const view = new EditorView({
    parent: settings.parent,
    state: EditorState.create({
      doc: settings.text,
      extensions: [
        Prec.highest(
          keymap.of([
            { key: 'Alt-ArrowDown', run: goToProblem(1), preventDefault: true },
            { key: 'Alt-ArrowUp', run: goToProblem(-1), preventDefault: true },
          ]),
        ),
        ...surface(settings),
        EditorView.updateListener.of((update) => {
          if (update.docChanged && !update.transactions.some(isFromServer))
            settings.onText(update.state.doc.toString());
          if (update.selectionSet || update.docChanged) settings.onCursor(update.state.selection.main.head);
        }),
      ],
    }),
  });
  return {
    show: (next) => {
      diagnostics = next;
      const length = view.state.doc.length;
      view.dispatch(
        setDiagnostics(
          view.state,
          next.map((each) => lintMark(each, length)),
        ),
      );
    },
    goTo,
    replace: (text, asEdit) => {
      const change = smallestChange(view.state.doc.toString(), text);
      // What came from the server is not the person's to undo.
      const annotations = asEdit ? [] : [fromServer.of(true), Transaction.addToHistory.of(false)];
      view.dispatch({ changes: change, annotations });
    },
    text: () => view.state.doc.toString(),
    focus: () => view.focus(),
    destroy: () => view.destroy(),
  };
}

function surface({ label, isReadOnly }: EditorSettings): readonly Extension[] {
  const nonce = document.querySelector('meta[name="csp-nonce"]')?.getAttribute('content');
  return [
    ...(nonce ? [EditorView.cspNonce.of(nonce)] : []),
    EditorView.contentAttributes.of({ 'aria-label': label, autocapitalize: 'off', spellcheck: 'true', tabindex: '0' }),
    EditorState.readOnly.of(isReadOnly),
    EditorView.editable.of(!isReadOnly),
    lineNumbers(),
    lintGutter(),
    history(),
    drawSelection(),
    bracketMatching(),
    // A new line begins where the one before it began.
    indentService.of((context, at) => /^ */.exec(context.lineAt(at, -1).text)?.[0].length ?? 0),
    closeBrackets(),
    highlightActiveLine(),
    highlightActiveLineGutter(),
    highlightSelectionMatches(),
    EditorView.lineWrapping,
    recipeLanguage(),
    tagColours(),
    isReadOnly ? [] : recipeCompletion(),
    // The Alt keys with arrows belong to the problems, and Tab to the page.
    keymap.of([...closeBracketsKeymap, ...completionKeymap, ...historyKeymap, ...searchKeymap, ...defaultKeymap]),
    editorTheme(),
  ];
}

function isFromServer(transaction: Transaction): boolean {
  return transaction.annotation(fromServer) === true;
}

function lintMark(each: ShownDiagnostic, length: number): Diagnostic {
  const from = Math.min(each.start.offset, length);
  const to = Math.min(Math.max(each.end.offset, from), length);
  const message = each.hint === undefined ? each.message : `${each.message} ${each.hint}`;
  return { from, to, severity: each.severity, message };
}

/** The next place to put right, going round at the end of the text. */
export function nextProblem(diagnostics: readonly ShownDiagnostic[], at: number, step: 1 | -1): ShownDiagnostic | null {
  const sorted = [...diagnostics].sort((a, b) => step * (a.start.offset - b.start.offset));
  return sorted.find((each) => step * (each.start.offset - at) > 0) ?? sorted[0] ?? null;
}

/** What must change between two texts, from the first difference to the last, so that the cursor stays where it stood. */
export function smallestChange(
  before: string,
  after: string,
): { readonly from: number; readonly to: number; readonly insert: string } {
  let start = 0;
  while (start < before.length && start < after.length && before[start] === after[start]) start++;
  let end = 0;
  const most = Math.min(before.length, after.length) - start;
  while (end < most && before.at(-1 - end) === after.at(-1 - end)) end++;
  return { from: start, to: before.length - end, insert: after.slice(start, after.length - end) };
}
