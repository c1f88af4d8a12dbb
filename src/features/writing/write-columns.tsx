import { type ReactNode, type RefObject, useState } from 'react';
import type { CompileFacts } from '#recipe';
import type { ShownDiagnostic } from '#text';
import { Segments } from '../../ui/field.tsx';
import { ChecksPanel } from './checks-panel.tsx';
import { CodeEditor } from './code-editor.tsx';
import type { MountedEditor } from './editor/mount-editor.ts';
import { LivePage } from './live-page.tsx';
import { countWords, ProblemsList } from './problems-list.tsx';
import { type LiveCompiled, useCompiled } from './use-compiled.ts';

type View = 'text' | 'page' | 'checks';

export interface WriteColumnsProps {
  readonly text: string;
  readonly facts: CompileFacts;
  readonly label: string;
  readonly isReadOnly?: boolean;
  readonly onText: (text: string) => void;
  readonly editor: RefObject<MountedEditor | null>;
  /** Stands under the checks. */
  readonly foot: (live: LiveCompiled, goTo: (diagnostic: ShownDiagnostic) => void) => ReactNode;
}

/** Text, live page and checks. Side by side where there is room; else the page and the checks share a place, on a phone all three. */
export function WriteColumns({ text, facts, label, isReadOnly = false, onText, editor, foot }: WriteColumnsProps) {
  const live = useCompiled(text, facts);
  const [cursor, setCursor] = useState(0);
  const [view, setView] = useState<View>('text');
  const goTo = (diagnostic: ShownDiagnostic) => {
    setView('text');
    // The editor is drawn again before it can take the focus.
    requestAnimationFrame(() => editor.current?.goTo(diagnostic.start.offset, diagnostic.end.offset));
  };
  const follow = (offset: number) => {
    if (isPhone()) return;
    editor.current?.goTo(offset);
  };
  return (
    <div className="write-cols" data-view={view}>
      <div className="write-switch">
        <Segments<View>
          label="Shown"
          options={[
            { value: 'text', label: 'Text' },
            { value: 'page', label: 'Live page' },
            {
              value: 'checks',
              label: live.diagnostics.length === 0 ? 'Checks' : `Checks: ${countWords(live.diagnostics)}`,
            },
          ]}
          value={view}
          onChange={setView}
        />
      </div>
      <div className="write-text">
        <CodeEditor
          text={text}
          label={label}
          isReadOnly={isReadOnly}
          diagnostics={live.diagnostics}
          onText={onText}
          onCursor={setCursor}
          handle={editor}
        />
        <ProblemsList diagnostics={live.diagnostics} isFresh={live.isFresh} isRead={live.isRead} onGoTo={goTo} />
      </div>
      <LivePage live={live} cursor={cursor} onFollow={follow} />
      <div className="write-side">
        <ChecksPanel live={live} onGoTo={goTo} />
      </div>
      <div className="write-foot">{foot(live, goTo)}</div>
    </div>
  );
}

/** On a phone the text lies behind a tab, and a touch on the page should not turn it over. */
function isPhone(): boolean {
  return typeof window.matchMedia === 'function' && window.matchMedia('(max-width: 760px)').matches;
}
