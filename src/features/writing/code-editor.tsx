import { type RefObject, useEffect, useRef, useState } from 'react';
import type { ShownDiagnostic } from '#text';
import { Failure } from '../../ui/blocks.tsx';
import type { MountedEditor } from './editor/mount-editor.ts';

export interface CodeEditorProps {
  readonly text: string;
  readonly label: string;
  readonly isReadOnly?: boolean;
  readonly diagnostics: readonly ShownDiagnostic[];
  readonly onText: (text: string) => void;
  readonly onCursor: (offset: number) => void;
  readonly handle: RefObject<MountedEditor | null>;
}

/** The editor, loaded when it is first needed; until then the text stands there as it is. */
export function CodeEditor({
  text,
  label,
  isReadOnly = false,
  diagnostics,
  onText,
  onCursor,
  handle,
}: CodeEditorProps) {
  const place = useRef<HTMLDivElement>(null);
  const [loading, setLoading] = useState<'loading' | 'there' | 'missing'>('loading');
  const latest = useRef({ text, onText, onCursor, diagnostics });
  latest.current = { text, onText, onCursor, diagnostics };

  useEffect(() => {
    let isGone = false;
    let mounted: MountedEditor | null = null;
    const mount = async () => {
      const { mountEditor } = await import('./editor/mount-editor.ts');
      if (isGone || place.current === null) return;
      mounted = mountEditor({
        parent: place.current,
        text: latest.current.text,
        label,
        isReadOnly,
        onText: (next) => latest.current.onText(next),
        onCursor: (offset) => latest.current.onCursor(offset),
      });
      handle.current = mounted;
      mounted.show(latest.current.diagnostics);
      setLoading('there');
    };
    // The file of an older release is gone from the server; the text is safe, and the page says what to do.
    mount().catch(() => setLoading('missing'));
    return () => {
      isGone = true;
      mounted?.destroy();
      handle.current = null;
    };
  }, [label, isReadOnly, handle]);

  useEffect(() => {
    if (loading === 'there') handle.current?.show(diagnostics);
  }, [diagnostics, loading, handle]);

  return (
    <div className="code-editor">
      {loading === 'missing' && (
        <Failure lead="The editor was not loaded." onAgain={() => window.location.reload()} againLabel="Reload">
          Quadrille was updated, or the connection is gone. Your text is kept.
        </Failure>
      )}
      {loading !== 'there' && <pre className="code-waiting">{text}</pre>}
      <div ref={place} className="code-place" />
    </div>
  );
}
