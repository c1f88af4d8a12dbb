import { useState } from 'react';
import { announce } from './announce.tsx';
import { Button, type ButtonProps } from './button.tsx';

export interface CopyButtonProps extends Omit<ButtonProps, 'onClick' | 'children'> {
  readonly text: string;
  readonly label: string;
}

/** Copies; over plain http, where browsers keep the clipboard shut, it goes the older way. */
export function CopyButton({ text, label, ...button }: CopyButtonProps) {
  const [outcome, setOutcome] = useState<'rest' | 'copied' | 'refused'>('rest');
  const copy = async () => {
    const copied = await copyText(text);
    setOutcome(copied ? 'copied' : 'refused');
    announce(copied ? 'Copied' : REFUSED, copied ? 'polite' : 'assertive');
  };
  return (
    <span className="inline-flex flex-wrap items-center gap-2">
      <Button {...button} onClick={() => void copy()}>
        {outcome === 'copied' ? 'Copied' : label}
      </Button>
      {outcome === 'refused' && <span className="field-error">{REFUSED}</span>}
    </span>
  );
}

const REFUSED = 'Not copied: the browser refused. Select the text and copy it by hand.';

/** Tells whether the text is on the clipboard. */
export async function copyText(text: string): Promise<boolean> {
  const clipboard: Clipboard | undefined = navigator.clipboard;
  if (clipboard !== undefined && window.isSecureContext) {
    try {
      await clipboard.writeText(text);
      return true;
    } catch {
      // refused by a permission: the older way may still be open
    }
  }
  return copyBySelection(text);
}

function copyBySelection(text: string): boolean {
  const before = document.activeElement;
  const area = document.createElement('textarea');
  area.value = text;
  area.readOnly = true;
  area.className = 'sr-only';
  // inside an open dialog, whose focus trap would take the focus back
  (before?.closest('[role="dialog"]') ?? document.body).append(area);
  area.select();
  const copied = document.execCommand('copy');
  area.remove();
  if (before instanceof HTMLElement) before.focus();
  return copied;
}
