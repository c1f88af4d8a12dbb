import { useQuery } from '@tanstack/react-query';
import { Link, useSearchParams } from 'react-router-dom';
import type { DesignRow } from '#api';
import { paths } from '../../lib/paths.ts';
import { usePerson } from '../../lib/session.ts';
import { EmptyLines, Failure, Loading } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { Segments } from '../../ui/field.tsx';
import { usePageTitle } from '../../ui/page-title.ts';
import { MarginNote, PageHead, Sheet } from '../../ui/sheet.tsx';
import { DesignRegister } from './design-register.tsx';
import { designsReading } from './queries.ts';
import './designs.css';

const SHOWN = [
  { value: 'mine', label: 'Mine' },
  { value: 'team', label: 'The team’s' },
] as const;
type Shown = (typeof SHOWN)[number]['value'];

export function DesignsPage() {
  usePageTitle('My designs');
  const { id } = usePerson();
  const designs = useQuery(designsReading);
  const [params, setParams] = useSearchParams();
  const shown: Shown = params.get('show') === 'team' ? 'team' : 'mine';
  const show = (next: Shown) => setParams(next === 'mine' ? {} : { show: next }, { replace: true });
  const rows = designs.data?.designs;
  const listed = rows?.filter((row) => (row.owner.id === id) === (shown === 'mine'));
  return (
    <Sheet
      margin={
        <div className="pt-8">
          <MarginNote label={listed === undefined ? 'Designs' : counted(listed.length)}>
            A design stays on the version that you kept it with. Nothing here changes by itself.
          </MarginNote>
        </div>
      }
    >
      <PageHead
        title={shown === 'mine' ? 'My designs' : 'The team’s designs'}
        actions={<Segments label="Show" options={SHOWN} value={shown} onChange={show} />}
      />
      {designs.isPending && <Loading label="Reading the designs" lines={5} />}
      {designs.isError && rows === undefined && (
        <Failure lead="The list was not read." onAgain={() => void designs.refetch()}>
          {designs.error.message}
        </Failure>
      )}
      {listed && <Listed rows={listed} shown={shown} onShow={show} />}
    </Sheet>
  );
}

interface ListedProps {
  readonly rows: readonly DesignRow[];
  readonly shown: Shown;
  readonly onShow: (shown: Shown) => void;
}

function Listed({ rows, shown, onShow }: ListedProps) {
  if (rows.length > 0) return <DesignRegister rows={rows} showsOwner={shown === 'team'} />;
  return (
    <EmptyLines>
      {shown === 'mine' ? (
        <>
          <span>No design yet. Open a recipe, put in your numbers, and press “Keep as a design”.</span>
          <span className="flex flex-wrap gap-4">
            <Link to={paths.recipes()}>Open the recipes</Link>
            <Button kind="text" onClick={() => onShow('team')}>
              See the team’s designs
            </Button>
          </span>
        </>
      ) : (
        <>
          <span>Nobody else has kept a design that the team sees.</span>
          <Button kind="text" onClick={() => onShow('mine')}>
            See your own
          </Button>
        </>
      )}
    </EmptyLines>
  );
}

function counted(count: number): string {
  return count === 1 ? '1 design' : `${count} designs`;
}
