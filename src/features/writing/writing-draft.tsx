import { useMemo, useState } from 'react';
import type { DraftPage } from '#api';
import { momentText } from '../../lib/locale.ts';
import { useMay, usePerson } from '../../lib/session.ts';
import { Button } from '../../ui/button.tsx';
import { Menu, MenuAct, MenuRule } from '../../ui/menu.tsx';
import { usePageTitle } from '../../ui/page-title.ts';
import { SaveLine } from '../../ui/save-line.tsx';
import { AuthorsDialog } from './authors-dialog.tsx';
import { ChangesDialog } from './changes-dialog.tsx';
import { ClosedPanel } from './closed-panel.tsx';
import { ConflictPanel } from './conflict-panel.tsx';
import { DiscardDialog } from './discard-dialog.tsx';
import { frontValue } from './front-text.ts';
import { factsOf } from './queries.ts';
import { SavesDialog } from './saves-dialog.tsx';
import { SendPanel } from './send-panel.tsx';
import { UnsentOffer } from './unsent-offer.tsx';
import { useDraftText } from './use-draft-text.ts';
import { WriteBar } from './write-bar.tsx';
import { WriteColumns } from './write-columns.tsx';

type Asked = 'saves' | 'authors' | 'discard' | 'changes';

/** A draft while it is written. */
export function WritingDraft({ page }: { page: DraftPage }) {
  const { draft, base } = page;
  const written = useDraftText(page);
  const { text, saver } = written;
  const { conflict } = saver.state;
  const [asked, setAsked] = useState<Asked | null>(null);
  const person = usePerson();
  const decides = useMay('decide reviews');
  const manages = decides || draft.owner.id === person.id;
  const title = frontValue(text, 'title');
  const shown = conflict?.kind === 'closed' ? { ...draft, state: conflict.saved.state } : draft;
  const facts = useMemo(() => factsOf(page), [page]);
  usePageTitle(`Writing ${title || 'a draft'}`);
  const close = () => setAsked(null);

  const acts = (
    <>
      {base !== null && (
        <Button kind="text" onClick={() => setAsked('changes')}>
          Show changes since version {base.version}
        </Button>
      )}
      <Menu trigger={<Button small>More</Button>}>
        <MenuAct onSelect={() => setAsked('saves')}>Earlier saves</MenuAct>
        {manages && <MenuAct onSelect={() => setAsked('authors')}>Invite other authors</MenuAct>}
        {manages && (
          <>
            <MenuRule />
            <MenuAct onSelect={() => setAsked('discard')}>Put this draft aside…</MenuAct>
          </>
        )}
      </Menu>
    </>
  );
  return (
    <div className="write-page">
      <WriteBar draft={shown} title={title} standing={<SaveLine standing={saver.standing} />} acts={acts} />
      {draft.sentBack !== null && (
        <p className="write-news">
          <b>Sent back</b> by {draft.sentBack.by}, {momentText(draft.sentBack.at)}: {draft.sentBack.reason}
        </p>
      )}
      {written.offered !== null && conflict === null && (
        <UnsentOffer offered={written.offered} current={text} onEnd={written.endOffer} />
      )}
      {conflict?.kind === 'moved' && <ConflictPanel conflict={conflict} mine={text} onEnd={written.goOnWith} />}
      {conflict?.kind === 'closed' && (
        <ClosedPanel
          conflict={conflict}
          mine={text}
          draft={draft}
          onLeave={() => saver.resolve(saver.state.base, null)}
          onShow={written.showServers}
        />
      )}
      <div className="write-body" hidden={conflict !== null}>
        <WriteColumns
          text={text}
          facts={facts}
          label={`Source of ${title || 'the draft'}`}
          onText={written.change}
          editor={written.editor}
          foot={(live, goTo) => <SendPanel draft={draft} written={written} live={live} onGoTo={goTo} />}
        />
      </div>
      {asked === 'changes' && base !== null && (
        <ChangesDialog
          title={`Changes since version ${base.version}`}
          left={`Version ${base.version}`}
          leftText={base.text}
          right="This draft"
          rightText={text}
          onClose={close}
        />
      )}
      {asked === 'saves' && (
        <SavesDialog
          draftId={draft.id}
          current={text}
          onRestore={(earlier) => {
            written.put(earlier, true);
            close();
          }}
          onClose={close}
        />
      )}
      {asked === 'authors' && <AuthorsDialog draft={draft} onClose={close} />}
      {asked === 'discard' && <DiscardDialog draftId={draft.id} written={written} title={title} onClose={close} />}
    </div>
  );
}
