import type { KeyboardEvent, ReactNode } from 'react';

export interface RegisterHead {
  readonly label: string;
  /** Read out but not shown, for a column of buttons or drawings. */
  readonly hidden?: boolean;
  readonly className?: string;
}

export interface RegisterTableProps {
  readonly caption: string;
  readonly heads: readonly RegisterHead[];
  readonly children: ReactNode;
}

/** A register: ruled rows. ↑ ↓ move between rows, Enter opens the row's link, Space ticks its box. */
export function RegisterTable({ caption, heads, children }: RegisterTableProps) {
  return (
    <table className="register" onKeyDown={moveBetweenRows}>
      <caption className="sr-only">{caption}</caption>
      <thead>
        <tr>
          {heads.map((head) => (
            <th key={head.label} scope="col" className={head.className}>
              {head.hidden ? <span className="sr-only">{head.label}</span> : head.label}
            </th>
          ))}
        </tr>
      </thead>
      <tbody>{children}</tbody>
    </table>
  );
}

const ROW_LINK = 'a[href], button, input[type="checkbox"]';

function moveBetweenRows(event: KeyboardEvent<HTMLTableElement>): void {
  const target = event.target;
  if (!(target instanceof HTMLElement) || event.altKey || event.ctrlKey || event.metaKey) return;
  if (target.matches('input:not([type="checkbox"]), select, textarea')) return;
  const row = target.closest('tr');
  if (row === null) return;
  if (event.key === 'ArrowDown' || event.key === 'ArrowUp') {
    const to = nextRowLink(row, event.key === 'ArrowDown');
    if (to === null) return;
    event.preventDefault();
    to.focus();
  } else if (event.key === ' ' && target.matches('a[href]')) {
    const box = row.querySelector<HTMLInputElement>('input[type="checkbox"]');
    if (box === null) return;
    event.preventDefault();
    box.click();
  }
}

function nextRowLink(row: HTMLTableRowElement, down: boolean): HTMLElement | null {
  let next = down ? row.nextElementSibling : row.previousElementSibling;
  while (next !== null) {
    const link = next.querySelector<HTMLElement>('a[href]') ?? next.querySelector<HTMLElement>(ROW_LINK);
    if (link !== null) return link;
    next = down ? next.nextElementSibling : next.previousElementSibling;
  }
  return null;
}
