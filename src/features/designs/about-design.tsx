import type { DesignPage } from '#api';
import { SelectField, TextArea, TextField } from '../../ui/field.tsx';
import type { DesignState } from './use-design.ts';
import { VISIBILITIES } from './visibilities.ts';

export interface AboutDesignProps {
  readonly page: DesignPage;
  readonly state: DesignState;
  readonly formId: string;
}

/** Name, project, note and who sees it: fields for its owner, words for everybody else and on paper. */
export function AboutDesign({ page, state: { form }, formId }: AboutDesignProps) {
  if (!page.mayChange) return <AboutWords note={page.note} />;
  return (
    <>
      <form id={formId} noValidate onSubmit={form.onSubmit} className="design-form">
        <h2>About this design</h2>
        <TextField label="Name" autoComplete="off" {...form.field('name')} />
        <TextField label="Project" optional autoComplete="off" {...form.field('project')} />
        <TextArea label="Note" optional rows={6} {...form.field('note')} />
        <SelectField label="Who sees it" options={VISIBILITIES} {...form.field('visibility')} />
      </form>
      <div className="design-printed">
        <AboutWords note={form.form.watch('note')} />
      </div>
    </>
  );
}

function AboutWords({ note }: { note: string }) {
  return (
    <section aria-label="Note">
      <h2>Note</h2>
      <p className="design-note">{note === '' ? 'No note.' : note}</p>
    </section>
  );
}
