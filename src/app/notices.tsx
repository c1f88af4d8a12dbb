import { momentText } from '../lib/locale.ts';
import { useMe } from '../lib/session.ts';
import { useAct } from '../lib/use-act.ts';
import { Button } from '../ui/button.tsx';

/** What a person is told once, at the next page after it happened: a link was made for their account, a draft came back. */
export function Notices() {
  const { notices } = useMe();
  const dismiss = useAct('me.dismissNotice', ['me.read']);
  if (notices.length === 0) return null;
  return (
    <section aria-label="Notices" className="border-ink border-b bg-wash px-8">
      <ul>
        {notices.map((notice) => (
          <li key={notice.id} className="flex flex-wrap items-center gap-4 border-rule not-first:border-t py-2">
            <span>
              {notice.text} <span className="note">{momentText(notice.at)}</span>
            </span>
            <Button
              small
              acting="Putting away"
              isActing={dismiss.isActing}
              onClick={() => void dismiss.act({ params: { id: notice.id }, body: {} })}
            >
              I have read it
            </Button>
          </li>
        ))}
      </ul>
    </section>
  );
}
