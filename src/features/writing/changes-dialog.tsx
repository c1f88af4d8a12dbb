import { useMemo } from 'react';
import { Button } from '../../ui/button.tsx';
import { Dialog, DialogActions } from '../../ui/dialog.tsx';
import { textRows } from './text-rows.ts';
import { TwoTexts } from './two-texts.tsx';

export interface ChangesDialogProps {
  readonly title: string;
  readonly left: string;
  readonly leftText: string;
  readonly right: string;
  readonly rightText: string;
  readonly onClose: () => void;
}

/** Two texts and what differs, to look at. */
export function ChangesDialog({ title, left, leftText, right, rightText, onClose }: ChangesDialogProps) {
  const rows = useMemo(() => textRows(leftText, rightText), [leftText, rightText]);
  const count = rows?.filter((row) => row.kind === 'differs').length ?? 0;
  return (
    <Dialog title={title} description={countOf(rows === null, count)} isOpen wide onClose={onClose}>
      {rows !== null && count > 0 && <TwoTexts rows={rows} left={left} right={right} />}
      <DialogActions>
        <Button onClick={onClose}>Close</Button>
      </DialogActions>
    </Dialog>
  );
}

function countOf(isTooDifferent: boolean, count: number): string {
  if (isTooDifferent) return 'The two texts have too little in common to compare them line by line.';
  if (count === 0) return 'Nothing differs.';
  return count === 1 ? 'One place differs.' : `${count} places differ.`;
}
