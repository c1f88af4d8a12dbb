import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { type DesignState, FIELD_LABELS, refusedNames } from './use-design.ts';

/** At the foot, in view as long as something is not kept: what that is, and the way to keep it. */
export function KeepBar({ state, formId }: { state: DesignState; formId: string }) {
  const { form, isDirty, moved } = state;
  return (
    <section className={isDirty ? 'keep-bar keep-bar-open' : 'keep-bar'} aria-label="Keeping">
      {form.refusal !== null && moved === null && (
        <Failure lead="Not kept.">{form.refusal.message} What you typed is still here.</Failure>
      )}
      <div className="keep-bar-line">
        {isDirty && <p className="note">{changedWords(state)}</p>}
        {form.mending !== null && <span className="field-error">{form.mending}</span>}
        {isDirty && (
          <Button small onClick={state.putBack}>
            Put back as kept
          </Button>
        )}
        <Button
          kind="main"
          type="submit"
          form={formId}
          acting="Keeping"
          isActing={form.isSending}
          cannot={whyNotKeep(state)}
        >
          Keep changes
        </Button>
      </div>
    </section>
  );
}

function whyNotKeep({ calculators, isDirty, moved }: DesignState): string | undefined {
  if (moved !== null) return 'Look at what was changed elsewhere first.';
  const refused = refusedNames(calculators);
  if (refused.length > 0) return `A field needs a change first: ${refused.join(', ')}.`;
  return isDirty ? undefined : 'Nothing has changed.';
}

function changedWords({ changedFields, changedInputs }: DesignState): string {
  const numbers = changedInputs.length === 1 ? ['1 number'] : [`${changedInputs.length} numbers`];
  const parts = [
    ...(changedInputs.length > 0 ? numbers : []),
    ...changedFields.map((key) => FIELD_LABELS[key].toLowerCase()),
  ];
  return `Changed and not kept yet: ${parts.join(', ')}.`;
}
