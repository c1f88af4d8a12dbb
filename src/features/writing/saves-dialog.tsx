import { useQuery } from '@tanstack/react-query';
import { useMemo, useState } from 'react';
import type { Answer } from '#api';
import { momentText } from '../../lib/locale.ts';
import { Failure, Loading } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { Dialog, DialogActions } from '../../ui/dialog.tsx';
import { saveReading, savesReading } from './queries.ts';
import { textRows } from './text-rows.ts';
import { TwoTexts } from './two-texts.tsx';

type SaveRow = Answer<'drafts.saves'>['saves'][number];

export interface SavesDialogProps {
  readonly draftId: string;
  readonly current: string;
  /** Absent where the text cannot be changed. */
  readonly onRestore?: (text: string) => void;
  readonly onClose: () => void;
}

/** Earlier saves: every one can be looked at beside the text of now, and put back as an edit. */
export function SavesDialog({ draftId, current, onRestore, onClose }: SavesDialogProps) {
  const saves = useQuery(savesReading(draftId));
  const [opened, setOpened] = useState<SaveRow | null>(null);
  return (
    <Dialog
      title={opened === null ? 'Earlier saves' : `Save of ${momentText(opened.at)}`}
      description={
        opened === null
          ? 'Putting one back is an edit: it can be undone, and what stands now stays in this list.'
          : undefined
      }
      isOpen
      wide
      onClose={onClose}
    >
      {saves.data === undefined && !saves.isError && <Loading label="Reading the saves" />}
      {saves.isError && (
        <Failure lead="The list was not read." onAgain={() => void saves.refetch()}>
          {saves.error.message}
        </Failure>
      )}
      {opened !== null ? (
        <OneSave
          draftId={draftId}
          save={opened}
          current={current}
          onRestore={onRestore}
          onBack={() => setOpened(null)}
        />
      ) : (
        <ul className="save-list">
          {saves.data?.saves.map((save) => (
            <li key={save.saveId}>
              <span>
                {momentText(save.at)}, {save.by.name}
                <span className="note block">
                  {save.revision === null
                    ? 'kept to the side: it did not go on the draft'
                    : `revision ${save.revision}`}
                </span>
              </span>
              <Button small onClick={() => setOpened(save)}>
                Look at it
              </Button>
            </li>
          ))}
        </ul>
      )}
      {opened === null && (
        <DialogActions>
          <Button onClick={onClose}>Close</Button>
        </DialogActions>
      )}
    </Dialog>
  );
}

interface OneSaveProps {
  readonly draftId: string;
  readonly save: SaveRow;
  readonly current: string;
  readonly onRestore: ((text: string) => void) | undefined;
  readonly onBack: () => void;
}

function OneSave({ draftId, save, current, onRestore, onBack }: OneSaveProps) {
  const read = useQuery(saveReading(draftId, save.saveId));
  const text = read.data?.text;
  const rows = useMemo(() => (text === undefined ? null : textRows(text, current)), [text, current]);
  const isSame = text === current;
  return (
    <>
      {text === undefined && !read.isError && <Loading label="Reading the save" />}
      {read.isError && (
        <Failure lead="The save was not read." onAgain={() => void read.refetch()}>
          {read.error.message}
        </Failure>
      )}
      {isSame && <p>This is the text as it stands now.</p>}
      {!isSame && rows !== null && <TwoTexts rows={rows} left="This save" right="Now" />}
      {!isSame && rows === null && text !== undefined && <pre className="conflict-text">{text}</pre>}
      <DialogActions>
        {text !== undefined && onRestore !== undefined && (
          <Button kind="main" cannot={isSame ? 'It is the same text.' : undefined} onClick={() => onRestore(text)}>
            Put this text back
          </Button>
        )}
        <Button onClick={onBack}>All saves</Button>
      </DialogActions>
    </>
  );
}
