import { useId, useRef } from 'react';
import { Link } from 'react-router-dom';
import type { ReviewPage } from '#api';
import { TrueMark } from '../../document/true-mark.tsx';
import { paths } from '../../lib/paths.ts';
import { usePerson } from '../../lib/session.ts';
import { Failure } from '../../ui/blocks.tsx';
import { Button } from '../../ui/button.tsx';
import { Checkbox, TextArea } from '../../ui/field.tsx';
import { checkedForYou } from './checks-list.tsx';
import type { Decision } from './use-decision.ts';
import { WhoIsTold } from './who-is-told.tsx';

/** What was checked, what is left to check, who will be told, and the two ways to decide. */
export function DecisionBox({ page, decision }: { page: ReviewPage; decision: Decision }) {
  const headingId = useId();
  const { review } = page;
  return (
    <section className="decision" aria-labelledby={headingId}>
      <h2 id={headingId}>{review.mayDecide ? 'Your decision' : 'The decision'}</h2>
      <div className="decision-part">
        <h3 className="lab">Checked for you</h3>
        <ul>
          {checkedForYou(page).map((line) => (
            <li key={line.words}>
              <TrueMark isTrue={line.passed}>{line.words}</TrueMark>
            </li>
          ))}
        </ul>
        {review.mayDecide && <Ticks page={page} decision={decision} />}
      </div>
      {review.mayDecide ? <Acts page={page} decision={decision} /> : <NotYours page={page} />}
    </section>
  );
}

function Ticks({ page, decision }: { page: ReviewPage; decision: Decision }) {
  return (
    <fieldset className="mt-3">
      <legend className="lab">Yours to check</legend>
      {page.ticks.map((tick) => (
        <Checkbox
          key={tick}
          label={tick}
          checked={decision.isTicked(tick)}
          onChange={(event) => decision.tick(tick, event.target.checked)}
          {...(decision.wasTicked(tick) ? { hint: 'You ticked this for the text as it was before.' } : {})}
        />
      ))}
    </fieldset>
  );
}

function Acts({ page, decision }: { page: ReviewPage; decision: Decision }) {
  const { id } = usePerson();
  const { draft } = page.review;
  const noteBox = useRef<HTMLTextAreaElement>(null);
  const isOwnWork = draft.writtenBy.some((writer) => writer.id === id);
  const sender = draft.sentBy ?? draft.owner;
  const sendBack = async () => {
    if (!(await decision.sendBack())) noteBox.current?.focus();
  };
  return (
    <>
      <div className="decision-part">
        <WhoIsTold page={page} />
      </div>
      <div className="decision-part grid gap-3">
        {isOwnWork && (
          <p className="decision-own">
            You wrote a part of this. Your team allows that you decide on it; the title block will then say “signed off
            by its author”.
          </p>
        )}
        <TextArea
          ref={noteBox}
          label="What you checked, or what should change"
          hint={`Sending back carries it to ${sender.id === id ? 'the writers' : sender.name}; signing off puts it into the team’s log.`}
          error={decision.noteError}
          value={decision.note}
          onChange={(event) => decision.setNote(event.target.value)}
        />
        {decision.refusal !== null && decision.moved === null && (
          <Failure lead={decision.refusal.lead}>{decision.refusal.message} Your note and ticks are still here.</Failure>
        )}
        <Button
          kind="main"
          acting="Signing off"
          isActing={decision.isSigning}
          cannot={decision.isSendingBack ? 'It is being sent back.' : whyNotYet(page, decision)}
          onClick={() => void decision.signOff()}
        >
          Sign off and publish
        </Button>
        <Button
          acting="Sending back"
          isActing={decision.isSendingBack}
          cannot={decision.isSigning ? 'It is being signed off.' : undefined}
          onClick={() => void sendBack()}
        >
          Send back
        </Button>
      </div>
    </>
  );
}

/** Why it cannot be signed off yet; undefined when it can. */
function whyNotYet({ document, checks }: ReviewPage, { moved, ticksLeft }: Decision): string | undefined {
  if (moved !== null) return 'The draft has moved: read it as it is now first.';
  if (document === null) return 'The text does not compile, so it cannot be published. Send it back.';
  if (checks.some((check) => !check.passed)) return 'A check fails, so it cannot be published. Send it back.';
  if (ticksLeft === 0) return undefined;
  return ticksLeft === 1 ? 'One box left to tick.' : `${ticksLeft} boxes left to tick.`;
}

function NotYours({ page }: { page: ReviewPage }) {
  const { id } = usePerson();
  const { draft, whyNot } = page.review;
  const isSender = draft.sentBy?.id === id;
  return (
    <div className="decision-part">
      <p>{whyNot}</p>
      {draft.state === 'in-review' && isSender && (
        <p className="note mt-2">
          You sent it, so you can take it back: <Link to={paths.write(draft.id)}>open the draft</Link>.
        </p>
      )}
    </div>
  );
}
