import { useState } from 'react';
import { type RecipePage, SIGN_OFF_TICKS } from '#api';
import { useAct } from '../../lib/use-act.ts';
import { announce } from '../../ui/announce.tsx';
import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { Dialog, DialogActions } from '../../ui/dialog.tsx';
import { Checkbox } from '../../ui/field.tsx';
import { proofWords } from './proof-words.ts';

const TICKS = Object.values(SIGN_OFF_TICKS);

export interface SignOffDialogProps {
  readonly page: RecipePage;
  readonly onClose: () => void;
}

/** An editor signs a supplied recipe as it stands: the text stays, the team's signature is added. */
export function SignOffDialog({ page, onClose }: SignOffDialogProps) {
  const { recipe, version, textHash, document } = page;
  const { act, isActing } = useAct('recipes.signOffSupplied', ['recipes.read', 'recipes.list']);
  const [ticked, setTicked] = useState<readonly string[]>([]);
  const [refused, setRefused] = useState<string | null>(null);
  const missing = TICKS.length - ticked.length;
  const sign = async () => {
    setRefused(null);
    const signed = await act({
      params: { slug: recipe.slug },
      body: { version: version.version, hash: textHash, ticks: [...ticked] },
    });
    if (signed.ok) {
      announce(`Signed off: ${recipe.title}, version ${signed.value.version}`);
      onClose();
      return;
    }
    setRefused(signed.error.message);
    announce(`Not signed off. ${signed.error.message}`, 'assertive');
  };
  return (
    <Dialog
      isOpen
      onClose={onClose}
      title={`Sign off ${recipe.number} as it stands?`}
      description="The text stays as supplied. From then on the title block carries your name, and the recipe counts as your team's."
    >
      <h3>Checked for you</h3>
      <ul className="note mb-4 list-disc pl-5">
        {proofWords(document).map((words) => (
          <li key={words}>{words}</li>
        ))}
      </ul>
      <h3>Yours to check</h3>
      {TICKS.map((tick) => (
        <Checkbox
          key={tick}
          label={tick}
          checked={ticked.includes(tick)}
          onChange={(event) =>
            setTicked(event.target.checked ? [...ticked, tick] : ticked.filter((one) => one !== tick))
          }
        />
      ))}
      {refused !== null && <Failure lead="Not signed off.">{refused}</Failure>}
      <DialogActions>
        <Button
          kind="main"
          acting="Signing off"
          isActing={isActing}
          cannot={missing === 0 ? undefined : missing === 1 ? 'One tick is missing.' : `${missing} ticks are missing.`}
          onClick={() => void sign()}
        >
          Sign off version {version.version}
        </Button>
        <Button onClick={onClose}>Not now</Button>
      </DialogActions>
    </Dialog>
  );
}
