import { useMemo } from 'react';
import { type TextChange, textChanges, type Words } from './text-changes.ts';

export interface WordsThatChangeProps {
  readonly before: string;
  readonly after: string;
}

/** The redline: what was taken out is struck, what was put in is underlined; both are said in words as well. */
export function WordsThatChange({ before, after }: WordsThatChangeProps) {
  const { changes, unchanged } = useMemo(() => textChanges(before, after), [before, after]);
  if (changes.length === 0) return <p className="note">The text is the same, letter for letter.</p>;
  return (
    <div className="redline">
      {changes.map((change) => (
        <Change key={`${change.isOldLine ? 'old ' : ''}${change.line}`} change={change} />
      ))}
      {unchanged.length > 0 && <p className="redline-same">The same: {unchanged.join('; ')}.</p>}
    </div>
  );
}

function Change({ change }: { change: TextChange }) {
  const [place, title] = splitPlace(change.place);
  return (
    <section className="redline-change" aria-label={`${change.place}, line ${change.line}`}>
      <p className="redline-place">
        {place}
        {title !== '' && <span className="note">{title}</span>}
        <span className="lab">
          {change.isOldLine ? 'old line' : 'line'} {change.line}
        </span>
      </p>
      <div className="redline-words">
        {change.isLayoutOnly && <p className="note">Only spaces and line breaks differ.</p>}
        <p className={change.place.startsWith('Section') ? 'redline-prose' : 'redline-source'}>
          {change.words.map((words, at) => (
            // biome-ignore lint/suspicious/noArrayIndexKey: runs are made anew with their texts and have no other name
            <Run key={at} words={words} next={change.words[at + 1]} />
          ))}
        </p>
      </div>
    </section>
  );
}

function Run({ words: { kind, text }, next }: { words: Words; next: Words | undefined }) {
  if (kind === 'same') return text;
  const Mark = kind === 'removed' ? 'del' : 'ins';
  const marked = text.trimEnd();
  // What was put in its place brings the space along.
  const space = kind === 'removed' && next?.kind === 'added' ? '' : text.slice(marked.length);
  return (
    <>
      <Mark>
        <span className="sr-only"> {kind}: </span>
        {marked}
        <span className="sr-only">. </span>
      </Mark>
      {space}
    </>
  );
}

function splitPlace(place: string): readonly [string, string] {
  const comma = place.indexOf(', ');
  return comma < 0 ? [place, ''] : [place.slice(0, comma), place.slice(comma + 2)];
}
