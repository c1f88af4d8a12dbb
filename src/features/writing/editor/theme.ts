import type { Extension } from '@codemirror/state';
import { EditorView } from '@codemirror/view';

/** Only what must beat the editor's own rules stands here; the colours of the source are in writing.css. */
export function editorTheme(): Extension {
  return EditorView.theme({
    '&': { height: '100%', backgroundColor: 'var(--sheet)', color: 'var(--ink)', fontSize: '0.8125rem' },
    '&.cm-focused': { outline: 'none' },
    '.cm-scroller': { fontFamily: 'var(--face-code)', lineHeight: '1.25rem', overflow: 'auto' },
    '.cm-content': { padding: '8px 0', caretColor: 'var(--ink)' },
    '.cm-line': { padding: '0 16px 0 8px' },
    '.cm-cursor, .cm-dropCursor': { borderLeftColor: 'var(--ink)' },
    '.cm-gutters': { backgroundColor: 'var(--sheet)', color: 'var(--ink-3)', border: 'none', paddingLeft: '4px' },
    '.cm-activeLine': { backgroundColor: 'transparent' },
    '&.cm-focused .cm-activeLine': { backgroundColor: 'color-mix(in srgb, var(--wash) 55%, transparent)' },
    '.cm-activeLineGutter': { backgroundColor: 'transparent', color: 'var(--ink)' },
    '&.cm-focused > .cm-scroller > .cm-selectionLayer .cm-selectionBackground, .cm-selectionBackground': {
      backgroundColor: 'var(--green-wash)',
    },
    '.cm-gutter-lint .cm-gutterElement': { padding: '0 2px' },
    '.cm-lint-marker-error': { content: 'none' },
    '.cm-lint-marker-warning': { content: 'none' },
    '.cm-lintRange-error': {
      backgroundImage: 'none',
      textDecoration: 'underline wavy var(--red) 1.5px',
      textUnderlineOffset: '3px',
    },
    '.cm-lintRange-warning': {
      backgroundImage: 'none',
      textDecoration: 'underline wavy var(--amber-line) 1.5px',
      textUnderlineOffset: '3px',
    },
    '.cm-lintRange-active': { backgroundColor: 'var(--red-wash)' },
    '.cm-lintPoint-error::after': { borderBottomColor: 'var(--red)' },
    '.cm-lintPoint-warning::after': { borderBottomColor: 'var(--amber-line)' },
    '.cm-tooltip': {
      backgroundColor: 'var(--sheet)',
      color: 'var(--ink)',
      border: '1px solid var(--ink)',
      boxShadow: '4px 4px 0 var(--wash)',
      fontFamily: 'var(--face-ui)',
      fontSize: '0.875rem',
    },
    '.cm-tooltip.cm-tooltip-autocomplete > ul': { fontFamily: 'var(--face-code)', fontSize: '0.8125rem' },
    '.cm-tooltip.cm-tooltip-autocomplete > ul > li': { padding: '3px 8px' },
    '.cm-tooltip-autocomplete ul li[aria-selected]': { backgroundColor: 'var(--green)', color: 'var(--on-green)' },
    '.cm-completionDetail': { fontStyle: 'normal', color: 'var(--ink-3)', marginLeft: '12px' },
    'li[aria-selected] .cm-completionDetail': { color: 'inherit' },
    '.cm-completionMatchedText': { textDecoration: 'underline' },
    '.cm-tooltip.cm-completionInfo': { padding: '6px 10px', maxWidth: '280px' },
    '.cm-diagnostic': { padding: '6px 12px', borderLeft: '4px solid var(--edge)' },
    '.cm-diagnostic-error': { borderLeftColor: 'var(--red)' },
    '.cm-diagnostic-warning': { borderLeftColor: 'var(--amber-line)' },
    '.cm-panels': { backgroundColor: 'var(--paper)', color: 'var(--ink)', fontFamily: 'var(--face-ui)' },
    '.cm-panels-bottom': { borderTop: '1px solid var(--ink)' },
    '.cm-panel.cm-search': { padding: '6px 8px' },
    '.cm-panel.cm-search label': { fontSize: '0.8125rem' },
    '.cm-textfield': { backgroundColor: 'var(--sheet)', border: '1px solid var(--edge)', fontSize: '0.875rem' },
    '.cm-button': {
      backgroundImage: 'none',
      backgroundColor: 'transparent',
      border: '1px solid var(--edge)',
      borderRadius: '2px',
      fontSize: '0.8125rem',
    },
    '.cm-searchMatch': { backgroundColor: 'var(--amber-wash)', outline: '1px solid var(--amber-line)' },
    '.cm-searchMatch-selected': { backgroundColor: 'var(--green-wash)', outlineColor: 'var(--green)' },
    '.cm-matchingBracket, &.cm-focused .cm-matchingBracket': {
      backgroundColor: 'var(--green-wash)',
      color: 'inherit',
    },
  });
}
