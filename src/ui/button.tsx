import { type ComponentProps, type MouseEvent, type ReactNode, useId } from 'react';

export type ButtonKind = 'main' | 'plain' | 'hard' | 'text';

const KIND_CLASS = {
  main: 'btn btn-main',
  plain: 'btn',
  hard: 'btn btn-hard',
  text: 'btn-text',
} as const satisfies Record<ButtonKind, string>;

/** The look of a button for links that lead to a page: `<Link className={buttonClass('main')}>`. */
export function buttonClass(kind: ButtonKind, small = false): string {
  return small && kind !== 'text' ? `${KIND_CLASS[kind]} btn-small` : KIND_CLASS[kind];
}

export interface ButtonProps extends Omit<ComponentProps<'button'>, 'disabled'> {
  readonly kind?: ButtonKind;
  readonly small?: boolean;
  /** Why it cannot act yet. It stays focusable, does nothing, and the reason stands beneath. */
  readonly cannot?: string | undefined;
  /** The label in -ing form, shown with ticks while `isActing`; both labels share one cell, so the width is kept. */
  readonly acting?: string;
  readonly isActing?: boolean;
}

export function Button(props: ButtonProps) {
  const { kind = 'plain', small, cannot, acting, isActing = false, className, children, onClick, ...rest } = props;
  const reasonId = useId();
  const blocked = cannot !== undefined || isActing;
  const press = (event: MouseEvent<HTMLButtonElement>) => {
    if (blocked) event.preventDefault();
    else onClick?.(event);
  };
  const button = (
    <button
      type="button"
      onMouseDown={rest.type === 'submit' ? keepFocusInField : undefined}
      {...rest}
      className={[buttonClass(kind, small), className].filter(Boolean).join(' ')}
      onClick={press}
      aria-disabled={blocked || undefined}
      data-acting={isActing ? '' : undefined}
      aria-describedby={
        [rest['aria-describedby'], cannot === undefined ? undefined : reasonId].filter(Boolean).join(' ') || undefined
      }
    >
      {acting === undefined ? children : <TwoLabels rest={children} acting={acting} isActing={isActing} />}
    </button>
  );
  // The same tree with and without a reason: a button that had the focus when the reason came or went keeps it.
  return (
    <span className={cannot === undefined ? 'contents' : 'inline-grid justify-items-start gap-1'}>
      {button}
      {cannot !== undefined && (
        <span id={reasonId} className="note">
          {cannot}
        </span>
      )}
    </span>
  );
}

/**
 * A press on a submit button does not leave the field before: what is said on leaving it would move the button from under
 * the pointer, and the press would be lost. Sending checks every field anyway.
 */
function keepFocusInField(event: MouseEvent<HTMLButtonElement>): void {
  event.preventDefault();
}

function TwoLabels({ rest, acting, isActing }: { rest: ReactNode; acting: string; isActing: boolean }) {
  return (
    <span className="inline-grid items-center justify-items-center">
      <Layer shown={!isActing}>{rest}</Layer>
      <Layer shown={isActing}>
        {acting}
        <Ticks />
      </Layer>
    </span>
  );
}

function Layer({ shown, children }: { shown: boolean; children: ReactNode }) {
  return (
    <span
      className={`col-start-1 row-start-1 inline-flex items-center gap-2 ${shown ? '' : 'invisible'}`}
      aria-hidden={!shown || undefined}
    >
      {children}
    </span>
  );
}

/** Three ticks: something is under way. */
export function Ticks() {
  return (
    <span className="ticks" aria-hidden="true">
      <i />
      <i />
      <i />
    </span>
  );
}
