import { Button } from '../../ui/button.tsx';
import type { Refusal } from '../../ui/use-endpoint-form.ts';
import { BlockRow } from './cover-sheet.tsx';

export interface FormFootProps {
  readonly form: { readonly refusal: Refusal | null; readonly mending: string | null; readonly isSending: boolean };
  readonly label: string;
  readonly acting: string;
  readonly note?: string;
}

/** The last row of a form in the title block: what stands in the way, and the button. */
export function FormFoot({ form, label, acting, note }: FormFootProps) {
  return (
    <BlockRow>
      <div className="grid grid-cols-[minmax(0,1fr)_auto] items-start gap-4">
        <div>
          {form.refusal !== null && <p className="field-error">{form.refusal.message}</p>}
          {form.mending !== null && <p className="field-error">{form.mending}</p>}
          {note !== undefined && <p className="note">{note}</p>}
        </div>
        <Button kind="main" type="submit" acting={acting} isActing={form.isSending}>
          {label}
        </Button>
      </div>
    </BlockRow>
  );
}
