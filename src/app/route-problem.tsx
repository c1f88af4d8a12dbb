import { useRouteError } from 'react-router-dom';
import { RequestError } from '../lib/query-client.ts';
import { Button } from '../ui/button.tsx';
import { usePageTitle } from '../ui/page-title.ts';
import { PageHead, Sheet } from '../ui/sheet.tsx';

/** What stands instead of a page that could not be drawn. One of the four places where a fault of ours is caught. */
export function RouteProblem() {
  const error = useRouteError();
  const { title, words } = wordsFor(error);
  usePageTitle(title);
  return (
    <main id="sheet" className="page">
      <Sheet>
        <PageHead title={title}>{words}</PageHead>
        <Button kind="main" onClick={() => window.location.reload()}>
          Reload
        </Button>
      </Sheet>
    </main>
  );
}

function wordsFor(error: unknown): { title: string; words: string } {
  if (isMissingChunk(error)) {
    return {
      title: 'Quadrille was updated',
      words: 'This page belongs to the release before. What you typed is kept in this browser; reload to go on.',
    };
  }
  if (error instanceof RequestError) {
    return { title: 'This sheet could not be read', words: error.failure.message };
  }
  return {
    title: 'This sheet could not be drawn',
    words: `That is a fault of the program, not of what you did. What you typed is kept. (${String(error)})`,
  };
}

/** A lazy page whose file is gone from the server. Browsers word it differently, and none gives it a code. */
function isMissingChunk(error: unknown): boolean {
  return (
    error instanceof Error && /dynamically imported module|Importing a module script|error loading/i.test(error.message)
  );
}
