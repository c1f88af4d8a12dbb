import { useQuery } from '@tanstack/react-query';
import type { ReactNode } from 'react';
import { Link } from 'react-router-dom';
import type { Answer } from '#api';
import { request } from '../../lib/client.ts';
import { paths } from '../../lib/paths.ts';
import { RequestError } from '../../lib/query-client.ts';
import { Failure } from '../../ui/blocks.tsx';
import { Ticks } from '../../ui/button.tsx';
import { BlockRow } from './cover-sheet.tsx';
import { useFragmentToken } from './fragment-token.ts';

type CheckName = 'setup.check' | 'invitations.check';

export interface LinkGateProps<N extends CheckName> {
  readonly check: N;
  readonly children: (token: string, checked: Answer<N>) => ReactNode;
}

/** Asks whether a link still works before its form is shown. */
export function LinkGate<N extends CheckName>({ check, children }: LinkGateProps<N>) {
  const token = useFragmentToken();
  const checked = useQuery({
    queryKey: [check, token],
    enabled: token !== null,
    staleTime: Number.POSITIVE_INFINITY,
    queryFn: async () => {
      const answer = await askAbout(check, token ?? '');
      if (!answer.ok) throw new RequestError(answer.error);
      return answer.value;
    },
  });
  if (token === null) {
    return <DeadLink>The link was not copied whole: the part after “#” is missing.</DeadLink>;
  }
  if (checked.isError) {
    const { failure } = checked.error;
    if (failure.kind === 'refused') return <DeadLink>{failure.message}</DeadLink>;
    return (
      <Failure lead="Not opened." onAgain={() => void checked.refetch()}>
        {failure.message}
      </Failure>
    );
  }
  if (checked.data === undefined) {
    return (
      <BlockRow>
        <p role="status">
          Looking at the link <Ticks />
        </p>
      </BlockRow>
    );
  }
  return children(token, checked.data);
}

function askAbout<N extends CheckName>(check: N, token: string) {
  return request<CheckName>(check, { body: { token } }) as ReturnType<typeof request<N>>;
}

export function DeadLink({ children }: { children: ReactNode }) {
  return (
    <BlockRow>
      <p>
        <b>This link does not open anything.</b> {children}
      </p>
      <p className="mt-2">
        <Link to={paths.signIn()}>Go to sign in</Link>
      </p>
    </BlockRow>
  );
}
