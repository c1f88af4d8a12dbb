import { useId, useMemo, useState } from 'react';
import { Link } from 'react-router-dom';
import type { DesignPage, DesignRow } from '#api';
import { CalculatorPanel } from '../../document/calculator-panel.tsx';
import { RecipeView } from '../../document/recipe-view.tsx';
import { paths } from '../../lib/paths.ts';
import { StopBlock } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { MarginNote, Sheet } from '../../ui/sheet.tsx';
import { AboutDesign } from './about-design.tsx';
import { DesignTitleBlock } from './design-title-block.tsx';
import { DuplicateDialog } from './duplicate-dialog.tsx';
import { KeepBar } from './keep-bar.tsx';
import { KeptAndNow } from './kept-and-now.tsx';
import { MovedDesignNotice } from './moved-design-notice.tsx';
import { RemoveDialog } from './remove-dialog.tsx';
import { benchNotesOf, cautionsOf } from './safety-parts.ts';
import { type DesignState, useDesign } from './use-design.ts';
import { useLeaveQuestion } from './use-leave-question.tsx';
import './designs.css';

/** One design: its numbers in the recipe's calculators, on the version that they were kept with. */
export function DesignSheet({ page }: { page: DesignPage }) {
  const { design, document, mayChange } = page;
  const state = useDesign(page);
  const formId = useId();
  // Somebody else's design is only tried out: there is nothing to lose on leaving.
  const leaving = useLeaveQuestion(mayChange && state.isDirty);
  const cautions = useMemo(() => cautionsOf(document), [document]);
  const notes = useMemo(() => benchNotesOf(document), [document]);
  const { calculators, moved } = state;
  const recipeName = `${design.recipe.number} ${design.recipe.title}`.trim();
  return (
    <div className={design.versionState === 'withdrawn' ? 'design-sheet is-withdrawn' : 'design-sheet'}>
      <Sheet
        className="pt-6"
        margin={
          <MarginNote label="Design">
            <Link to={paths.designs()}>My designs</Link>
          </MarginNote>
        }
      >
        <VersionBanner design={design} />
        {moved !== null && <MovedDesignNotice page={page} state={state} moved={moved} />}
        <DesignTitleBlock page={page} isDirty={mayChange && state.isDirty}>
          <DesignActs page={page} state={state} onLeave={leaving.letGo} />
        </DesignTitleBlock>
        {document.front.hazards.length > 0 && (
          <div className="design-cautions">
            <RecipeView document={cautions} calculators={calculators} panels="beside" />
            <p className="note">
              Isolation, creepage, fusing and protective earth are outside this sheet. Local codes and a licensed
              practitioner decide.
            </p>
          </div>
        )}
        <KeptAndNow page={page} state={state} />
        <div className="design-two">
          <div className="design-about">
            <AboutDesign page={page} state={state} formId={formId} />
            {notes.body.length > 0 && (
              <section className="design-notes" aria-label="Layout and measuring">
                <h2>Layout and measuring</h2>
                <RecipeView document={notes} calculators={calculators} panels="beside" />
              </section>
            )}
          </div>
          <div className="design-bench">
            {calculators.list.map((one) => (
              <CalculatorPanel
                key={one.id}
                calculators={calculators}
                id={one.id}
                heading={`${design.name}: ${recipeName}, version ${design.version}`}
              />
            ))}
          </div>
        </div>
        {mayChange && <KeepBar state={state} formId={formId} />}
      </Sheet>
      {leaving.question}
    </div>
  );
}

function VersionBanner({ design: { recipe, version, versionState, newestVersion } }: { design: DesignRow }) {
  if (versionState === 'withdrawn') {
    return (
      <div className="mb-4">
        <StopBlock title={`Version ${version} was withdrawn. Do not build from this design.`}>
          <p>
            Why it was withdrawn stands on <Link to={paths.recipe(recipe.slug, version)}>the recipe’s page</Link>.
          </p>
        </StopBlock>
      </div>
    );
  }
  if (newestVersion <= version) return null;
  return (
    <p role="note" className="design-newer mb-4">
      <b>Version {newestVersion} is newer.</b> This design stays on version {version}, which is {versionState}; its
      numbers do not change. <Link to={paths.recipe(recipe.slug, newestVersion)}>Open version {newestVersion}</Link>
    </p>
  );
}

interface DesignActsProps {
  readonly page: DesignPage;
  readonly state: DesignState;
  readonly onLeave: () => void;
}

function DesignActs({ page, state, onLeave }: DesignActsProps) {
  const [open, setOpen] = useState<'duplicate' | 'remove' | null>(null);
  const refused = state.calculators.list.some((one) => one.inputs.refused.length > 0);
  const close = () => setOpen(null);
  return (
    <div className="design-acts">
      <Button small cannot={refused ? 'A field needs a change first.' : undefined} onClick={() => setOpen('duplicate')}>
        Keep as another design
      </Button>
      <Button small onClick={() => window.print()}>
        Print
      </Button>
      {page.mayChange && (
        <Button small kind="hard" onClick={() => setOpen('remove')}>
          Remove…
        </Button>
      )}
      {open === 'duplicate' && (
        <DuplicateDialog page={page} calculators={state.calculators} onClose={close} onLeave={onLeave} />
      )}
      {open === 'remove' && (
        <RemoveDialog design={page.design} onClose={close} onLeave={onLeave} onRefused={state.meetMoved} />
      )}
    </div>
  );
}
