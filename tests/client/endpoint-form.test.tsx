import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { describe, expect, test, vi } from 'vitest';
import * as z from 'zod';
import { fail, ok, type Result } from '#text';
import { LiveRegions } from '../../src/ui/announce.tsx';
import { Button } from '../../src/ui/button.tsx';
import { TextField } from '../../src/ui/field.tsx';
import { type Refusal, useEndpointForm } from '../../src/ui/use-endpoint-form.ts';

const schema = z.object({
  name: z.string().min(1, 'Write a name.'),
  city: z.string().min(3, 'Use 3 characters.').max(20),
});
type Values = z.infer<typeof schema>;

function Form({ send }: { send: (values: Values) => Promise<Result<null, Refusal>> }) {
  const form = useEndpointForm({ schema, defaultValues: { name: '', city: '' }, send, onDone: () => undefined });
  return (
    <form aria-label="Test" noValidate onSubmit={form.onSubmit}>
      <TextField label="Name" hint="Any name." {...form.field('name')} />
      <TextField label="City" {...form.field('city')} />
      {form.mending !== null && <p>{form.mending}</p>}
      <Button type="submit" acting="Keeping" isActing={form.isSending}>
        Keep
      </Button>
    </form>
  );
}

function open(send: (values: Values) => Promise<Result<null, Refusal>> = async () => ok(null)) {
  render(
    <>
      <Form send={send} />
      <LiveRegions />
    </>,
  );
  return { name: screen.getByLabelText('Name'), city: screen.getByLabelText('City'), user: userEvent.setup() };
}

/** What is read after a control's name: the texts that `aria-describedby` points at, in the order of the page. */
function describedAs(control: HTMLElement): string {
  const ids = (control.getAttribute('aria-describedby') ?? '').split(' ');
  return ids.map((id) => document.getElementById(id)?.textContent ?? '').join(' ');
}

describe('the one behaviour of forms', () => {
  test('ties label, hint and error to the field', async () => {
    const { name, user } = open();
    expect(describedAs(name)).toBe('Any name.');
    await user.click(name);
    await user.tab();
    expect(describedAs(name)).toBe('Any name. Write a name.');
    expect(name.getAttribute('aria-invalid')).toBe('true');
  });

  test('says nothing while a field is typed into, speaks on leaving it, and is quiet while it is mended', async () => {
    const { city, user } = open();
    await user.type(city, 'ab');
    expect(screen.queryByText('Use 3 characters.')).toBeNull();
    await user.tab();
    expect(await screen.findByText('Use 3 characters.')).toBeTruthy();
    await user.type(city, 'c');
    expect(screen.queryByText('Use 3 characters.')).toBeNull();
  });

  test('speaks of a limit without words of its own as the server does', async () => {
    const { city, user } = open();
    await user.type(city, 'x'.repeat(21));
    await user.tab();
    expect(await screen.findByText('Use at most 20 characters.')).toBeTruthy();
  });

  test('does not leave the field when its button is pressed, since words that appear then would move the button away', async () => {
    const { city, user } = open();
    await user.type(city, 'ab');
    await user.pointer({ keys: '[MouseLeft>]', target: screen.getByRole('button', { name: 'Keep' }) });
    expect(document.activeElement).toBe(city);
    expect(screen.queryByText('Use 3 characters.')).toBeNull();
  });

  test('moves the focus to the first wrong field on sending, and says how many there are', async () => {
    const send = vi.fn(async () => ok(null));
    const { name, user } = open(send);
    await user.click(screen.getByRole('button', { name: 'Keep' }));
    expect(document.activeElement).toBe(name);
    expect(screen.getByRole('alert').textContent).toBe('2 fields need a change.');
    expect(send).not.toHaveBeenCalled();
  });

  test('puts what the server says about a field in the same place, until that field is changed', async () => {
    const { name, city, user } = open(async () =>
      fail({ message: 'One field needs another value.', fields: [{ field: 'city', message: 'No such city.' }] }),
    );
    await user.type(name, 'Ines');
    await user.type(city, 'Atlantis');
    await user.click(screen.getByRole('button', { name: 'Keep' }));
    expect(await screen.findByText('No such city.')).toBeTruthy();
    expect(document.activeElement).toBe(city);
    await user.tab({ shift: true });
    expect(screen.getByText('No such city.')).toBeTruthy();
    await user.type(city, '!');
    expect(screen.queryByText('No such city.')).toBeNull();
  });

  test('does not send twice while an answer is awaited, and the button says that it acts', async () => {
    let answer: (sent: Result<null, Refusal>) => void = () => undefined;
    const send = vi.fn(() => new Promise<Result<null, Refusal>>((done) => (answer = done)));
    const { name, city, user } = open(send);
    await user.type(name, 'Ines');
    await user.type(city, 'Lisbon');
    await user.keyboard('{Enter}');
    const acting = await screen.findByRole('button', { name: 'Keeping' });
    expect(acting.getAttribute('aria-disabled')).toBe('true');
    await user.click(acting);
    await user.type(name, '{Enter}');
    expect(send).toHaveBeenCalledTimes(1);
    answer(ok(null));
    expect(await screen.findByRole('button', { name: 'Keep' })).toBeTruthy();
  });
});

describe('a button that cannot act yet', () => {
  test('keeps the focus, does nothing, and says why', async () => {
    const act = vi.fn();
    render(
      <Button cannot="Two checks fail." onClick={act}>
        Send for review
      </Button>,
    );
    const button = screen.getByRole('button', { name: 'Send for review' });
    const user = userEvent.setup();
    await user.tab();
    expect(document.activeElement).toBe(button);
    await user.keyboard('{Enter}');
    expect(act).not.toHaveBeenCalled();
    expect(describedAs(button)).toBe('Two checks fail.');
  });
});
