import { useSearchParams } from 'react-router-dom';
import { paths } from '../../lib/paths.ts';
import { useMay } from '../../lib/session.ts';
import { usePageTitle } from '../../ui/page-title.ts';
import { MarginNote, PageHead, Sheet } from '../../ui/sheet.tsx';
import { DraftsRegister } from './drafts-register.tsx';
import { StartForm } from './start-form.tsx';
import './writing.css';

/** Drafts that are being written, and the ways to start another. */
export function StartPage() {
  usePageTitle('Write a recipe');
  const mayWrite = useMay('write drafts');
  const [search] = useSearchParams();
  const from = search.get('from');
  if (!mayWrite) {
    return (
      <Sheet>
        <PageHead title="Write a recipe">
          Authors write recipes, but your role is reader. An admin can change that under Team.
        </PageHead>
      </Sheet>
    );
  }
  return (
    <Sheet
      margin={
        <div className="pt-10">
          <MarginNote label="How it goes">
            <p>
              A draft is kept as you type. When its checks agree you send it for review, and a second person signs it
              off.
            </p>
          </MarginNote>
        </div>
      }
    >
      <PageHead title="Write a recipe" />
      <StartForm key={from ?? ''} from={from} />
      <h2 id="drafts" className="pt-10 pb-2">
        Drafts
      </h2>
      <DraftsRegister />
      <p className="note pt-3">
        Published recipes are under <a href={paths.recipes()}>Recipes</a>; a change of one starts there or above.
      </p>
    </Sheet>
  );
}
