import { useEffect, useMemo, useRef, useState } from 'react';
import { Link } from 'react-router-dom';
import type { DraftPage } from '#api';
import { openDraftChannel, tellOfDraft } from '../../lib/draft-channel.ts';
import { momentText } from '../../lib/locale.ts';
import { paths } from '../../lib/paths.ts';
import { usePerson } from '../../lib/session.ts';
import { useAct } from '../../lib/use-act.ts';
import { announce } from '../../ui/announce.tsx';
import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { usePageTitle } from '../../ui/page-title.ts';
import type { MountedEditor } from './editor/mount-editor.ts';
import { frontValue } from './front-text.ts';
import { factsOf } from './queries.ts';
import { SavesDialog } from './saves-dialog.tsx';
import { WriteBar } from './write-bar.tsx';
import { WriteColumns } from './write-columns.tsx';

/** A draft that this person cannot change now: in review, closed, or somebody else's. */
export function FrozenDraft({ page, onNews }: { page: DraftPage; onNews: () => void }) {
  const { draft, text } = page;
  const editor = useRef<MountedEditor | null>(null);
  const title = frontValue(text, 'title');
  const [seesSaves, setSeesSaves] = useState(false);
  useFrozenNews(draft.id, onNews);
  const facts = useMemo(() => factsOf(page), [page]);
  usePageTitle(`${title || 'A draft'}, ${draft.state === 'in-review' ? 'in review' : 'not to be changed'}`);
  return (
    <div className="write-page">
      <WriteBar
        draft={draft}
        title={title}
        standing={null}
        acts={
          <Button kind="text" onClick={() => setSeesSaves(true)}>
            Earlier saves
          </Button>
        }
      />
      <div className="write-news">
        <p>
          <WhyFrozen page={page} />
        </p>
        {page.mayTakeBack && <TakeBack page={page} />}
      </div>
      <div className="write-body">
        <WriteColumns
          text={text}
          facts={facts}
          label={`Source of ${title || 'the draft'}, not to be changed`}
          isReadOnly
          onText={() => undefined}
          editor={editor}
          foot={() => null}
        />
      </div>
      {seesSaves && <SavesDialog draftId={draft.id} current={text} onClose={() => setSeesSaves(false)} />}
    </div>
  );
}

/** What cannot be written here may be decided elsewhere: in another tab, or while this window was behind others. */
function useFrozenNews(id: string, onNews: () => void): void {
  const person = usePerson();
  const heard = useRef(onNews);
  heard.current = onNews;
  useEffect(() => {
    const look = () => heard.current();
    const onVisible = () => document.visibilityState === 'visible' && look();
    const channel = openDraftChannel(person.id, id, (message) => message.kind === 'state' && look());
    window.addEventListener('focus', look);
    document.addEventListener('visibilitychange', onVisible);
    return () => {
      channel.close();
      window.removeEventListener('focus', look);
      document.removeEventListener('visibilitychange', onVisible);
    };
  }, [person.id, id]);
}

function WhyFrozen({ page }: { page: DraftPage }) {
  const { draft } = page;
  switch (draft.state) {
    case 'in-review':
      return (
        <>
          <b>In review, and frozen.</b> {draft.sentBy?.name ?? 'Somebody'} sent revision {draft.revision}
          {draft.sentAt === null ? '' : `, ${momentText(draft.sentAt)}`}
          {draft.note === '' ? '.' : `: “${draft.note}”`} <Link to={paths.review(draft.id)}>Open the review</Link>
        </>
      );
    case 'published':
      return (
        <>
          <b>Published.</b> A change is a new draft. <Link to={paths.recipe(draft.slug)}>Open the recipe</Link>
        </>
      );
    case 'discarded':
      return (
        <>
          <b>Put aside.</b> Its earlier saves can still be read.
        </>
      );
    case 'draft':
      return (
        <>
          <b>{draft.owner.name} writes this draft.</b> Ask to be invited, to write it too.
        </>
      );
    default:
      return draft.state satisfies never;
  }
}

function TakeBack({ page }: { page: DraftPage }) {
  const { draft, hash } = page;
  const takeBack = useAct('drafts.takeBack', ['drafts.list', 'drafts.read', 'reviews.list', 'me.read']);
  const person = usePerson();
  const [failure, setFailure] = useState<string | null>(null);
  const go = async () => {
    setFailure(null);
    const answer = await takeBack.act({ params: { id: draft.id }, body: { revision: draft.revision, hash } });
    if (answer.ok) {
      announce('Taken back. You can write on.');
      tellOfDraft(person.id, draft.id, { kind: 'state' });
    } else {
      setFailure(answer.error.message);
      announce(`Not taken back. ${answer.error.message}`, 'assertive');
    }
  };
  return (
    <>
      <Button small acting="Taking back" isActing={takeBack.isActing} onClick={() => void go()}>
        Take back
      </Button>
      {failure !== null && <Failure lead="Not taken back.">{failure}</Failure>}
    </>
  );
}
