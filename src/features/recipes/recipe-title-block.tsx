import type { RecipePage, VersionRow } from '#api';
import { calendarDayText, dayText } from '../../lib/locale.ts';
import { StopBlock, TitleBlock, TitleCell } from '../../ui/blocks.tsx';
import { StateMark } from '../../ui/marks.tsx';
import { formulaCell } from './proof-words.ts';
import { RecipeActs } from './recipe-acts.tsx';

/** What the recipe is and what stands behind it. A withdrawn version has the red block before it. */
export function RecipeTitleBlock({ page }: { page: RecipePage }) {
  const { recipe, version, document } = page;
  const { proof, front } = document;
  const formulas = formulaCell(document);
  return (
    <>
      {version.state === 'withdrawn' && (
        <StopBlock title={`Version ${version.version} was withdrawn. Do not build from this sheet.`}>
          {version.note !== '' && <p>{version.note}</p>}
        </StopBlock>
      )}
      <TitleBlock
        cells={
          <>
            <TitleCell label="Version">
              <span className="version-big">{version.version}</span>
            </TitleCell>
            <TitleCell label="State" note={dayText(version.at)}>
              <StateMark state={version.state} />
            </TitleCell>
            <TitleCell label="Written by">{writtenBy(version)}</TitleCell>
            <SignedCell version={version} />
            <TitleCell label="Next review due" {...(recipe.reviewOverdue ? { note: <b>review overdue</b> } : {})}>
              {recipe.reviewDue === null ? 'not set' : calendarDayText(recipe.reviewDue)}
            </TitleCell>
            <TitleCell label="Worked examples" note={`${proof.examplesFromOutside} from outside`}>
              {proof.examples === 0 ? 'none' : `${proof.examplesPassed} of ${proof.examples} agree`}
            </TitleCell>
            <TitleCell label="Formulas" note={formulas.note}>
              {formulas.main}
            </TitleCell>
            <TitleCell label="Supply">{front.supply ?? 'not named'}</TitleCell>
          </>
        }
      >
        <div className="recipe-line">
          <span>{recipe.number}</span>
          <span>
            {recipe.designs === 0
              ? 'no design uses it yet'
              : `used in ${recipe.designs} ${recipe.designs === 1 ? 'design' : 'designs'}`}
          </span>
        </div>
        <h1 tabIndex={-1}>{front.title}</h1>
        <p className="recipe-lead">{front.summary}</p>
        <RecipeActs page={page} />
      </TitleBlock>
    </>
  );
}

function writtenBy({ writtenBy: names, supplied }: VersionRow): string {
  if (names.length > 0) return names.join(', ');
  return supplied === null ? 'not named' : 'supplied';
}

function SignedCell({ version }: { version: VersionRow }) {
  const { signedBy, selfSigned, supplied } = version;
  const origin = supplied === null ? undefined : `supplied with Quadrille ${supplied}`;
  if (signedBy === null) {
    return (
      <TitleCell label="Signed off by" note={origin}>
        not by your team
      </TitleCell>
    );
  }
  return (
    <TitleCell label="Signed off by" note={selfSigned ? 'signed off by its author' : origin}>
      {signedBy}
    </TitleCell>
  );
}
