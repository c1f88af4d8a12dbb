import type { ReviewPage } from '#api';
import { usePerson } from '../../lib/session.ts';
import { counted } from './number-words.ts';

interface Told {
  readonly id: string;
  readonly name: string;
  readonly why: string[];
}

/** Who gets a message when this is signed off. Owners of private designs are told too, and not named. */
export function WhoIsTold({ page }: { page: ReviewPage }) {
  const { id } = usePerson();
  const { designs, base } = page;
  const told = toldPeople(page).filter((one) => one.id !== id);
  const others = othersWords(designs);
  return (
    <>
      <h3 className="lab">Told when you sign off</h3>
      {told.length === 0 && others === null && <p>Nobody but you.</p>}
      <ul className="told">
        {told.map((one) => (
          <li key={one.id}>
            {one.name} <span>{one.why.join(', ')}</span>
          </li>
        ))}
      </ul>
      {others !== null && <p className="note">{others}</p>}
      {base !== null && designs.seen.length + designs.unchanged + designs.privateCount > 0 && (
        <p className="note mt-1">Designs stay on the version that they were kept with.</p>
      )}
    </>
  );
}

function toldPeople({ review: { draft }, designs }: ReviewPage): readonly Told[] {
  const people = new Map<string, Told>();
  const tell = (who: { readonly id: string; readonly name: string }, why: string) => {
    const known = people.get(who.id) ?? { ...who, why: [] };
    people.set(who.id, { ...known, why: [...known.why, why] });
  };
  for (const writer of draft.writtenBy) tell(writer, 'wrote it');
  for (const who of [draft.owner, ...(draft.sentBy ? [draft.sentBy] : [])]) {
    if (!people.has(who.id)) tell(who, who.id === draft.owner.id ? 'owns the draft' : 'sent it');
  }
  for (const owner of new Set(designs.seen.map((design) => design.owner.id))) {
    const own = designs.seen.filter((design) => design.owner.id === owner);
    const broken = own.filter((design) => design.changes.some((change) => change.newlyBroken)).length;
    for (const { owner: who } of own.slice(0, 1)) {
      tell(who, counted(own.length, 'design') + (broken > 0 ? `, ${broken} broken` : ''));
    }
  }
  return [...people.values()];
}

function othersWords({ unchanged, privateCount }: ReviewPage['designs']): string | null {
  const parts = [
    ...(unchanged > 0 ? [`${counted(unchanged, 'design')} that would not move`] : []),
    ...(privateCount > 0 ? [counted(privateCount, 'private design')] : []),
  ];
  return parts.length === 0 ? null : `And the owners of ${parts.join(' and of ')}.`;
}
