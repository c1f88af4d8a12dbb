import { useQueryClient } from '@tanstack/react-query';
import { useRef, useState } from 'react';
import { CONTRACT, type DesignPage, type KeptInputs, type ShownResults } from '#api';
import { shownResults, typedInputs } from '../../document/shown-results.ts';
import { type CalculatorsState, useCalculators } from '../../document/use-calculators.ts';
import type { ClientFailure } from '../../lib/failure.ts';
import { usesDecimalComma } from '../../lib/locale.ts';
import { useAct } from '../../lib/use-act.ts';
import { announce } from '../../ui/announce.tsx';
import { useEndpointForm } from '../../ui/use-endpoint-form.ts';
import { inputDifferences, mergedInputs, withText } from './design-inputs.ts';
import { designReading } from './queries.ts';

/** What a 409 tells: the design as it is now. */
export type MovedDesign = Pick<DesignPage, 'design' | 'inputs' | 'note' | 'shown'>;
export type DesignForm = Pick<DesignPage['design'], 'name' | 'project' | 'visibility'> & { readonly note: string };

const FORM = CONTRACT['designs.keep'].body.pick({ name: true, project: true, note: true, visibility: true });
const MOVED = CONTRACT['designs.read'].answer.pick({ design: true, inputs: true, note: true, shown: true });

const KEYS = ['name', 'project', 'note', 'visibility'] as const satisfies readonly (keyof DesignForm)[];

/** The fields of a design as words. */
export const FIELD_LABELS = {
  name: 'Name',
  project: 'Project',
  note: 'Note',
  visibility: 'Who sees it',
} as const satisfies Record<keyof DesignForm, string>;

export function formOf({ design, note }: Pick<DesignPage, 'design' | 'note'>): DesignForm {
  return { name: design.name, project: design.project, visibility: design.visibility, note };
}

/** A design on its page: what was kept, what was changed since, and the ways between the two. */
export function useDesign(page: DesignPage) {
  const queries = useQueryClient();
  const { design, document } = page;
  const [texts, setTexts] = useState<KeptInputs>(page.inputs);
  const [moved, setMoved] = useState<MovedDesign | null>(null);
  const options = { decimalComma: usesDecimalComma() };
  const calculators = useCalculators(
    document,
    texts,
    (calculator, name, text) => setTexts((now) => withText(now, calculator, name, text)),
    options,
  );
  // The same calculators over what was kept: what the design comes to now, and what a change is measured against.
  const kept = useCalculators(document, page.inputs, keepsNothing, options);
  const changedInputs = inputDifferences(typedInputs(kept), typedInputs(calculators));

  const takePage = (change: Partial<DesignPage>) =>
    queries.setQueryData(designReading(design.id).queryKey, { ...page, ...change });
  const update = useAct('designs.update', ['designs.list']);
  const sent = useRef<{ readonly inputs: KeptInputs; readonly shown: ShownResults } | null>(null);
  const form = useEndpointForm({
    schema: FORM,
    defaultValues: formOf(page),
    send: (values) => {
      const numbers = { inputs: typedInputs(calculators), shown: shownResults(calculators) };
      sent.current = changedInputs.length > 0 ? numbers : null;
      const body = { updatedAt: design.updatedAt, ...values, ...sent.current };
      return update.act({ params: { id: design.id }, body });
    },
    onDone: (row, { note }) => {
      takePage({ design: row, note, ...sent.current });
      // The server trims; what was typed while it answered stays.
      const now = formOf({ design: row, note });
      for (const key of KEYS) if (values()[key].trim() === now[key].trim()) form.form.setValue(key, now[key]);
      setMoved(null);
      announce(`Kept: ${row.name}`);
    },
    onRefused: (failure) => setMoved(movedDesign(failure)),
  });

  const values = () => form.form.getValues();
  form.form.watch();
  const base = formOf(page);
  const changedFields = KEYS.filter((key) => values()[key] !== base[key]);

  return {
    calculators,
    kept,
    form,
    changedInputs,
    changedFields,
    isDirty: changedFields.length > 0 || changedInputs.length > 0,
    moved,
    /** Another act on the design met one that moved. */
    meetMoved: (failure: ClientFailure) => {
      const found = movedDesign(failure);
      setMoved(found);
      return found !== null;
    },
    /** What was changed here stays and can be kept over what is there now; the rest is taken as it is there. */
    goOnWithMine: (there: MovedDesign) => {
      const now = formOf(there);
      for (const key of KEYS) if (!changedFields.includes(key)) form.form.setValue(key, now[key]);
      setTexts(mergedInputs(page.inputs, texts, there.inputs));
      takePage(there);
      setMoved(null);
    },
    takeTheirs: (there: MovedDesign) => {
      form.form.reset(formOf(there));
      setTexts(there.inputs);
      takePage(there);
      setMoved(null);
    },
    /** Back to what was last kept. */
    putBack: () => {
      form.form.reset(base);
      setTexts(page.inputs);
    },
    takeShown: async () => {
      const shown = shownResults(kept);
      const body = { updatedAt: design.updatedAt, shown };
      const taken = await update.act({ params: { id: design.id }, body });
      if (taken.ok) {
        takePage({ design: taken.value, shown });
        announce('Kept: the numbers as they come out now');
        return null;
      }
      setMoved(movedDesign(taken.error));
      announce(`Not kept. ${taken.error.message}`, 'assertive');
      return taken.error.message;
    },
    isUpdating: update.isActing,
  };
}

export type DesignState = ReturnType<typeof useDesign>;

export function refusedNames(calculators: CalculatorsState): readonly string[] {
  return calculators.list.flatMap((state) => state.inputs.refused);
}

function keepsNothing(): void {
  // nobody types into the calculators that only say what the kept numbers come to
}

function movedDesign(failure: ClientFailure): MovedDesign | null {
  if (failure.kind !== 'refused' || failure.status !== 409) return null;
  const { design, inputs, note, shown } = failure.problem;
  const read = MOVED.safeParse({ design, inputs, note, shown });
  return read.success ? read.data : null;
}
