import type { LiveCompiled } from './use-compiled.ts';

/** What keeps a compiled text from being sent; undefined when nothing does. */
export function whyNotSend(live: LiveCompiled): string | undefined {
  if (!live.isRead) return 'Waits for the checks.';
  if (live.isClean) return undefined;
  const lines = [...new Set(live.diagnostics.filter((d) => d.severity === 'error').map((d) => d.start.line))];
  const failed = live.checks.filter((check) => !check.passed);
  const waits = [
    lines.length > 0 ? listed(lines) : '',
    failed.length > 0 ? (failed.length === 1 ? `the check “${failed[0]?.title}”` : `${failed.length} checks`) : '',
  ].filter(Boolean);
  return `Waits for ${waits.join(' and ') || 'a text that can be read'}.`;
}

const SHOWN_LINES = 4;

function listed(lines: readonly number[]): string {
  if (lines.length === 1) return `line ${lines[0]}`;
  const more = lines.length - SHOWN_LINES;
  return `lines ${lines.slice(0, SHOWN_LINES).join(', ')}${more > 0 ? ` and ${more} more` : ''}`;
}
