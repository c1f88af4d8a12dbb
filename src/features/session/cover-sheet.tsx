import type { ReactNode } from 'react';
import { QuadrilleMark } from '../../ui/marks.tsx';
import './cover-sheet.css';
import { CoverDrawing } from './cover-drawing.tsx';

const ZONES_ACROSS = ['1', '2', '3', '4', '5', '6', '7', '8'] as const;
const ZONES_DOWN = ['A', 'B', 'C', 'D', 'E'] as const;

export interface CoverSheetProps {
  readonly title: string;
  readonly lead: ReactNode;
  readonly team: string;
  /** What stands in the cell "Signed by". */
  readonly signedBy: string;
  readonly children: ReactNode;
}

/** A drawing sheet with its zones; the form sits in the title block, bottom right. */
export function CoverSheet({ title, lead, team, signedBy, children }: CoverSheetProps) {
  const today = new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'short', year: 'numeric' }).format(
    new Date(),
  );
  return (
    <main className="cover">
      <Zones className="cover-across" names={ZONES_ACROSS} />
      <Zones className="cover-down" names={ZONES_DOWN} />
      <div className="cover-sheet">
        <div className="cover-words">
          <h1 className="text-title tracking-tight sm:text-cover">{title}</h1>
          <div className="mt-4 max-w-[440px] font-read text-ink-2 text-read">{lead}</div>
        </div>
        <div className="cover-drawing">
          <CoverDrawing />
        </div>
        <div className="cover-block">
          <div className="cover-cells cover-cells-name">
            <p className="flex items-center gap-3.5 font-head font-read text-title tracking-tight">
              <QuadrilleMark className="size-7" />
              Quadrille
            </p>
            <Cell label="Team">{team}</Cell>
          </div>
          {children}
          <div className="cover-cells">
            <Cell label="Sheet">1 of 1</Cell>
            <Cell label="Date">{today}</Cell>
            <Cell label="Signed by">{signedBy}</Cell>
          </div>
        </div>
      </div>
      <Zones className="cover-down" names={ZONES_DOWN} />
      <Zones className="cover-across" names={ZONES_ACROSS} />
    </main>
  );
}

function Cell({ label, children }: { label: string; children: ReactNode }) {
  return (
    <div>
      <p className="lab">{label}</p>
      <p className="font-mid">{children}</p>
    </div>
  );
}

function Zones({ names, className }: { names: readonly string[]; className: string }) {
  return (
    <div className={className} aria-hidden="true">
      {names.map((name) => (
        <span key={name}>{name}</span>
      ))}
    </div>
  );
}

/** A row of the title block. */
export function BlockRow({ children, split = false }: { children: ReactNode; split?: boolean }) {
  return <div className={split ? 'cover-row cover-row-split' : 'cover-row'}>{children}</div>;
}
