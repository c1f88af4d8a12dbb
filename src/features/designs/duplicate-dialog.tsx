import { useNavigate } from 'react-router-dom';
import { CONTRACT, type DesignPage } from '#api';
import { shownResults, typedInputs } from '../../document/shown-results.ts';
import type { CalculatorsState } from '../../document/use-calculators.ts';
import { paths } from '../../lib/paths.ts';
import { useAct } from '../../lib/use-act.ts';
import { announce } from '../../ui/announce.tsx';
import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { Dialog, DialogActions } from '../../ui/dialog.tsx';
import { SelectField, TextArea, TextField } from '../../ui/field.tsx';
import { useEndpointForm } from '../../ui/use-endpoint-form.ts';
import { VISIBILITIES } from './visibilities.ts';

const FORM = CONTRACT['designs.keep'].body.pick({ name: true, project: true, note: true, visibility: true });

export interface DuplicateDialogProps {
  readonly page: DesignPage;
  readonly calculators: CalculatorsState;
  readonly onClose: () => void;
  readonly onLeave: () => void;
}

/** Another design on the same version, with the numbers that stand on the page now. */
export function DuplicateDialog({
  page: { design, note, mayChange },
  calculators,
  onClose,
  onLeave,
}: DuplicateDialogProps) {
  const navigate = useNavigate();
  const { act } = useAct('designs.keep', ['designs.list', 'recipes.list']);
  const { field, onSubmit, isSending, refusal, mending } = useEndpointForm({
    schema: FORM,
    defaultValues: {
      name: `${design.name}, another`,
      project: design.project,
      note,
      visibility: mayChange ? design.visibility : 'team',
    },
    send: (values) =>
      act({
        body: {
          ...values,
          slug: design.recipe.slug,
          version: design.version,
          inputs: typedInputs(calculators),
          shown: shownResults(calculators),
        },
      }),
    onDone: async (copy) => {
      announce(`Kept: ${copy.name}`);
      onLeave();
      await navigate(paths.design(copy.id));
    },
  });
  return (
    <Dialog
      isOpen
      onClose={onClose}
      title="Keep as another design"
      description={`It stays on ${design.recipe.number || design.recipe.title}, version ${design.version}, with the numbers that stand there now. “${design.name}” stays as it was last kept.`}
    >
      <form noValidate onSubmit={onSubmit} className="grid gap-4">
        <TextField label="Name" autoComplete="off" {...field('name')} />
        <TextField label="Project" optional autoComplete="off" {...field('project')} />
        <TextArea label="Note" optional {...field('note')} />
        <SelectField label="Who sees it" options={VISIBILITIES} {...field('visibility')} />
        {refusal && <Failure lead="Not kept.">{refusal.message} Your numbers are still here.</Failure>}
        <DialogActions>
          <Button kind="main" type="submit" acting="Keeping" isActing={isSending}>
            Keep as another design
          </Button>
          <Button onClick={onClose}>Not now</Button>
          {mending !== null && <span className="field-error">{mending}</span>}
        </DialogActions>
      </form>
    </Dialog>
  );
}
