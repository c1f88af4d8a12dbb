import { useNavigate } from 'react-router-dom';
import { CONTRACT, type KeptInputs, type RecipePage, type ShownResults } from '#api';
import { paths } from '../../lib/paths.ts';
import { useAct } from '../../lib/use-act.ts';
import { announce } from '../../ui/announce.tsx';
import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { Dialog, DialogActions } from '../../ui/dialog.tsx';
import { SelectField, TextArea, TextField } from '../../ui/field.tsx';
import { useEndpointForm } from '../../ui/use-endpoint-form.ts';

const FORM = CONTRACT['designs.keep'].body.pick({ name: true, project: true, note: true, visibility: true });

const VISIBILITIES = [
  { value: 'team', label: 'The team' },
  { value: 'only me', label: 'Only me' },
] as const;

export interface KeepDesignDialogProps {
  readonly page: RecipePage;
  readonly inputs: KeptInputs;
  readonly shown: ShownResults;
  readonly onClose: () => void;
}

/** Names the numbers on the page and keeps them as a design, tied to this version. */
export function KeepDesignDialog({ page: { recipe, version }, inputs, shown, onClose }: KeepDesignDialogProps) {
  const navigate = useNavigate();
  const broken = brokenLimits(shown);
  const { act } = useAct('designs.keep', ['designs.list', 'recipes.list']);
  const { field, onSubmit, isSending, refusal, mending } = useEndpointForm({
    schema: FORM,
    defaultValues: { name: '', project: '', note: '', visibility: 'team' },
    send: (values) => act({ body: { ...values, slug: recipe.slug, version: version.version, inputs, shown } }),
    onDone: async (design) => {
      announce(`Kept: ${design.name}`);
      await navigate(paths.design(design.id));
    },
  });
  return (
    <Dialog
      isOpen
      onClose={onClose}
      title="Keep as a design"
      description={`It stays on ${recipe.number}, version ${version.version}, with the numbers that stand there now.`}
    >
      <form noValidate onSubmit={onSubmit} className="grid gap-4">
        <TextField label="Name" autoComplete="off" {...field('name')} />
        <TextField label="Project" optional autoComplete="off" {...field('project')} />
        <TextArea label="Note" optional {...field('note')} />
        <SelectField label="Who sees it" options={VISIBILITIES} {...field('visibility')} />
        {broken.length > 0 && (
          <p>
            {broken.length === 1 ? '1 limit does not hold' : `${broken.length} limits do not hold`} with these numbers:{' '}
            {broken.join(', ')}. The design says so too.
          </p>
        )}
        {refusal && <Failure lead="Not kept.">{refusal.message} Your numbers are still here.</Failure>}
        <DialogActions>
          <Button kind="main" type="submit" acting="Keeping" isActing={isSending}>
            Keep as a design
          </Button>
          <Button onClick={onClose}>Not now</Button>
          {mending !== null && <span className="field-error">{mending}</span>}
        </DialogActions>
      </form>
    </Dialog>
  );
}

function brokenLimits(shown: ShownResults): readonly string[] {
  return Object.values(shown.calculators).flatMap(({ limits }) =>
    Object.entries(limits).flatMap(([name, state]) => (state === 'exceeded' || state === 'no-value' ? [name] : [])),
  );
}
