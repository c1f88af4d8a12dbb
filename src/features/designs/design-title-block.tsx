import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import type { DesignPage } from '#api';
import { momentText } from '../../lib/locale.ts';
import { paths } from '../../lib/paths.ts';
import { TitleBlock, TitleCell } from '../../ui/blocks.tsx';
import { StateMark } from '../../ui/marks.tsx';
import { visibilityWords } from './visibilities.ts';

export interface DesignTitleBlockProps {
  readonly page: DesignPage;
  readonly isDirty: boolean;
  readonly children: ReactNode;
}

/** Whose design it is, which version it stands on, and when it was kept. */
export function DesignTitleBlock({ page: { design }, isDirty, children }: DesignTitleBlockProps) {
  const { recipe, version } = design;
  return (
    <TitleBlock
      cells={
        <>
          <TitleCell label="Recipe version">
            <span className="text-page">{version}</span>
          </TitleCell>
          <TitleCell label="Its state">
            <StateMark state={design.versionState} />
          </TitleCell>
          <TitleCell label="Design of" note={`seen by: ${visibilityWords(design).toLowerCase()}`}>
            {design.owner.name}
          </TitleCell>
          <TitleCell label="Kept" {...(isDirty ? { note: <b>with changes not kept yet</b> } : {})}>
            {momentText(design.updatedAt)}
          </TitleCell>
          <div className="design-checked title-cell">
            <dt className="lab">Checked by, date</dt>
            <dd> </dd>
          </div>
        </>
      }
    >
      <p className="design-recipe">
        <Link to={paths.recipe(recipe.slug, version)}>
          {recipe.number} {recipe.title}, version {version}
        </Link>
      </p>
      <h1 tabIndex={-1}>{design.name}</h1>
      {design.project !== '' && <p className="text-ink-2">{design.project}</p>}
      {children}
    </TitleBlock>
  );
}
