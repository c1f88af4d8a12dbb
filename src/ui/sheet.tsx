import type { ReactNode } from 'react';

export interface SheetProps {
  /** What is secondary: it stands on the squared margin, and above the body where the margin folds. */
  readonly margin?: ReactNode;
  readonly children: ReactNode;
  readonly className?: string;
}

/** One row of a page: margin and sheet. */
export function Sheet({ margin, children, className = '' }: SheetProps) {
  return (
    <div className={`sheet-row ${className}`}>
      <div className="sheet-margin">{margin}</div>
      <div className="sheet-body">{children}</div>
    </div>
  );
}

/** A short text on the margin with its label. */
export function MarginNote({ label, children }: { label: string; children?: ReactNode }) {
  return (
    <div className="mb-4">
      <p className="lab">{label}</p>
      {children !== undefined && <div className="note mt-1">{children}</div>}
    </div>
  );
}

/** The heading of a page: the focus goes to it after a change of page. `actions` stands to its right. */
export function PageHead({
  title,
  children,
  actions,
}: {
  title: ReactNode;
  children?: ReactNode;
  actions?: ReactNode;
}) {
  return (
    <div className="flex flex-wrap items-end justify-between gap-x-8 gap-y-2 pt-8 pb-4">
      <div>
        <h1 tabIndex={-1}>{title}</h1>
        {children !== undefined && <div className="mt-1 max-w-measure text-ink-2">{children}</div>}
      </div>
      {actions !== undefined && <div className="flex flex-wrap items-start gap-2">{actions}</div>}
    </div>
  );
}
