import { act, render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import { describe, expect, test } from 'vitest';
import type { KeptInputs } from '#api';
import type { RecipeDocument } from '#recipe';
import { CalculatorPanel } from '../../src/document/calculator-panel.tsx';
import { RecipeView } from '../../src/document/recipe-view.tsx';
import { useCalculators } from '../../src/document/use-calculators.ts';
import { LiveRegions } from '../../src/ui/announce.tsx';
import { compileText, starterDocument } from './starter-documents.ts';

interface Told {
  readonly calculator: string;
  readonly name: string;
  readonly text: string | null;
  readonly kept: string | null;
}

interface PageProps {
  readonly document: RecipeDocument;
  readonly initial: KeptInputs;
  readonly told: Told[];
}

function Page({ document, initial, told }: PageProps) {
  const [texts, setTexts] = useState(initial);
  const calculators = useCalculators(document, texts, (calculator, name, text, kept) => {
    told.push({ calculator, name, text, kept });
    setTexts((now) => {
      const { [name]: _old, ...others } = now[calculator] ?? {};
      return { ...now, [calculator]: text === null ? others : { ...others, [name]: text } };
    });
  });
  return (
    <>
      <LiveRegions />
      {document.calculators.map(({ id }) => (
        <CalculatorPanel key={id} calculators={calculators} id={id} heading="DA-02" />
      ))}
      <RecipeView document={document} calculators={calculators} panels="beside" />
    </>
  );
}

function open(document: RecipeDocument, initial: KeptInputs = {}) {
  const told: Told[] = [];
  render(<Page document={document} initial={initial} told={told} />);
  return { told, user: userEvent.setup() };
}

const gain = () => starterDocument('difference-amplifier-with-gain');

/** The words under which a result is read out: `Gain: 4.700. How it comes about`. */
function spokenResult(label: string): string {
  return screen.getByRole('button', { name: new RegExp(`^${label}: `) }).getAttribute('aria-label') ?? '';
}

function limitRow(name: string): HTMLElement {
  const row = screen.getAllByRole('listitem').find((item) => item.querySelector('.limit-name')?.textContent === name);
  if (!row) throw new Error(`there is no limit row ${name}`);
  return row;
}

describe('fields', () => {
  test('a reader types 10k and reads what was understood; leaving the field makes that its text', async () => {
    const { user, told } = open(gain());
    const field = screen.getByLabelText<HTMLInputElement>('Feedback');
    expect(field.value).toBe('47 kΩ');
    await user.clear(field);
    await user.type(field, '33k');
    expect(screen.getByText('Read as 33 kΩ.')).toBeTruthy();
    // 33/10, worked out by hand.
    expect(spokenResult('Gain')).toContain('3.300');
    await user.tab();
    expect(field.value).toBe('33 kΩ');
    expect(told.at(-1)).toMatchObject({ calculator: 'amp', name: 'R2', text: '33 kΩ', kept: '33 kΩ' });
  });

  test('a bare number takes the unit last shown and is kept with it', async () => {
    const { user, told } = open(gain());
    const field = screen.getByLabelText<HTMLInputElement>('Feedback');
    await user.clear(field);
    await user.type(field, '20');
    expect(told.at(-1)).toMatchObject({ text: '20', kept: '20 kΩ' });
    expect(spokenResult('Gain')).toContain('2.000');
  });

  test('a refused text stays with the reason, and the last good results stay, marked as such', async () => {
    const { user } = open(gain());
    const field = screen.getByLabelText<HTMLInputElement>('Feedback');
    await user.clear(field);
    await user.type(field, '33k');
    await user.type(field, ' V');
    expect(field.value).toBe('33k V');
    expect(field.getAttribute('aria-invalid')).toBe('true');
    expect(field.getAttribute('aria-describedby')).toBeTruthy();
    expect(screen.getByText(/last good numbers/)).toBeTruthy();
    expect(spokenResult('Gain')).toContain('3.300');
    await user.tab();
    expect(field.value).toBe('33k V');
  });

  test('a value outside the limits of entry is refused with both limits', async () => {
    const { user } = open(gain());
    const field = screen.getByLabelText<HTMLInputElement>('Feedback');
    await user.clear(field);
    await user.type(field, '2 MΩ');
    // min="1 kΩ" max="1 MΩ" in the recipe's text
    expect(
      document.getElementById((field.getAttribute('aria-describedby') ?? '').split(' ')[0] ?? '')?.textContent,
    ).toMatch(/2 MΩ is outside 1\.000\u2009kΩ to 1\.000\u2009MΩ/);
  });

  test('an emptied field is refused as missing, never silently taken as the recipe’s', async () => {
    const { user } = open(gain());
    await user.clear(screen.getByLabelText('Feedback'));
    expect(screen.getByLabelText('Feedback').getAttribute('aria-invalid')).toBe('true');
  });

  test('the arrow keys step the last digit shown, with Shift by ten, and Esc puts back what stood there', async () => {
    const { user } = open(gain());
    const field = screen.getByLabelText<HTMLInputElement>('Feedback');
    await user.click(field);
    await user.keyboard('{ArrowUp}');
    expect(field.value).toBe('48 kΩ');
    await user.keyboard('{Shift>}{ArrowDown}{/Shift}');
    expect(field.value).toBe('38 kΩ');
    await user.keyboard('{Escape}');
    expect(field.value).toBe('47 kΩ');
  });

  test('Enter keeps the value and the field stays in focus', async () => {
    const { user } = open(gain());
    const field = screen.getByLabelText<HTMLInputElement>('Feedback');
    await user.clear(field);
    await user.type(field, '4k7{Enter}');
    expect(field.value).toBe('4.7 kΩ');
    expect(document.activeElement).toBe(field);
  });

  test('a range has two ends; an end that holds a range by itself stands for both', async () => {
    const { user } = open(gain());
    const low = screen.getByLabelText<HTMLInputElement>('Difference in, lowest');
    const high = screen.getByLabelText<HTMLInputElement>('Difference in, highest');
    expect([low.value, high.value]).toEqual(['−400 mV', '400 mV']);
    await user.clear(high);
    await user.type(high, '100 mV');
    expect(low.value).toBe('−400 mV');
    await user.clear(low);
    await user.type(low, '±200 mV');
    expect(low.value).toBe('±200 mV');
    expect(high.value).toBe('200 mV');
    await user.tab();
    expect(low.value).toBe('−200 mV');
  });

  test('crossed ends are refused and both texts stay', async () => {
    const { user } = open(gain());
    const low = screen.getByLabelText<HTMLInputElement>('Difference in, lowest');
    await user.clear(low);
    await user.type(low, '1 V');
    expect(low.getAttribute('aria-invalid')).toBe('true');
    expect(low.value).toBe('1 V');
    expect(screen.getByLabelText<HTMLInputElement>('Difference in, highest').value).toBe('400 mV');
  });

  test('options are a list of the words that the author gave', async () => {
    const { user } = open(starterDocument('average-of-inputs'));
    const list = screen.getByRole('combobox', { name: 'Inputs' });
    expect(
      within(list)
        .getAllByRole('option')
        .map((option) => option.textContent),
    ).toEqual(['two', 'three', 'four']);
    await user.selectOptions(list, 'two');
    // 40 kΩ / 2, worked out by hand.
    expect(spokenResult('Feedback that gives the mean')).toContain('20.00\u2009kΩ');
  });

  test('a calculator reads the one above it and says so, until it is typed over', async () => {
    const { user } = open(starterDocument('missing-second-divider'));
    const panels = screen.getAllByRole('region').filter((region) => region.classList.contains('calculator'));
    const [above, below] = panels;
    if (!above || !below) throw new Error('the recipe has two calculators');
    const upper = within(above).getByLabelText<HTMLInputElement>('Feedback');
    await user.clear(upper);
    await user.type(upper, '30 kΩ{Tab}');
    const lower = within(below).getByLabelText<HTMLInputElement>('Feedback');
    expect(lower.value).toBe('30 kΩ');
    expect(within(below).getAllByText(/^From “/).length).toBeGreaterThan(0);
  });
});

describe('undo', () => {
  test('what is typed in one field is one step; undo and redo walk over it', async () => {
    const { user } = open(gain());
    const field = screen.getByLabelText<HTMLInputElement>('Feedback');
    await user.clear(field);
    await user.type(field, '33k{Tab}');
    await user.click(screen.getByRole('button', { name: 'Undo' }));
    expect(field.value).toBe('47 kΩ');
    await user.click(screen.getByRole('button', { name: 'Redo' }));
    expect(field.value).toBe('33 kΩ');
  });

  test('Ctrl+Z in a field takes the step back', async () => {
    const { user } = open(gain());
    const field = screen.getByLabelText<HTMLInputElement>('Feedback');
    await user.click(field);
    await user.keyboard('{ArrowUp}{Control>}z{/Control}');
    expect(field.value).toBe('47 kΩ');
    await user.keyboard('{Control>}y{/Control}');
    expect(field.value).toBe('48 kΩ');
  });

  test('putting back the recipe’s values is one step that can be undone', async () => {
    const { user } = open(gain(), { amp: { R1: '20 kΩ', R2: '60 kΩ' } });
    expect(spokenResult('Gain')).toContain('3.000');
    await user.click(screen.getByRole('button', { name: 'put back the recipe’s values' }));
    expect(spokenResult('Gain')).toContain('4.700');
    await user.click(screen.getByRole('button', { name: 'Undo' }));
    expect(screen.getByLabelText<HTMLInputElement>('Feedback').value).toBe('60 kΩ');
    expect(spokenResult('Gain')).toContain('3.000');
  });
});

describe('results', () => {
  test('the key result is the first that a stop limit is about', () => {
    open(gain());
    expect(document.querySelector('.result-key .result-label')?.textContent).toContain('Output');
  });

  test('a result opens on focus to its formula, the numbers put in and where each comes from', async () => {
    const { user } = open(gain());
    const feedback = screen.getByLabelText('Feedback');
    await user.clear(feedback);
    await user.type(feedback, '33k');
    act(() => screen.getByRole('button', { name: /^Gain: / }).focus());
    const note = await screen.findByRole('note');
    expect(note.querySelector('math mfrac')).toBeTruthy();
    expect(note.textContent).toContain('33.00\u2009kΩ');
    expect(within(note).getByRole('row', { name: /Feedback 33\.00\u2009kΩ typed in/ })).toBeTruthy();
    expect(within(note).getByRole('row', { name: /From the first input .* from the recipe/ })).toBeTruthy();
  });

  test('a result that shares an input with a broken stop limit is in ink and says not valid', async () => {
    const { user } = open(gain());
    const key = () => document.querySelector('.result-key');
    expect(key()?.hasAttribute('data-good')).toBe(true);
    const supply = screen.getByLabelText('Supply');
    await user.clear(supply);
    await user.type(supply, '3 V');
    expect(key()?.hasAttribute('data-good')).toBe(false);
    expect(key()?.textContent).toContain('not valid: output');
    // The gain stands on the two resistors alone, and the broken limit on these too.
    expect(spokenResult('Gain')).toContain('not valid: output');
    // The worst rejection shares the tolerance only with the limit of the reference, which holds.
    expect(spokenResult('Rejection of these values')).toContain('not valid');
  });

  test('live numbers in the prose follow the fields', async () => {
    const { user } = open(starterDocument('rail-splitter'));
    const values = () => [...document.querySelectorAll('.live-value')].map((value) => value.textContent);
    // 12 V / 2 ∓ 10 mA · 1 mΩ, worked out by hand.
    expect(values()).toEqual(['5.99999\u2009V', '6.00001\u2009V']);
    const supply = screen.getByLabelText('Supply');
    await user.clear(supply);
    await user.type(supply, '10 V');
    expect(values()).toEqual(['4.99999\u2009V', '5.00001\u2009V']);
  });

  test('the key result is spoken once nobody types, and a newly exceeded limit with it', async () => {
    const { user } = open(gain());
    const region = () => document.querySelector('[aria-live="polite"]')?.textContent ?? '';
    const before = region();
    await user.tripleClick(screen.getByLabelText('Supply'));
    await user.paste('3 V');
    expect(region()).toBe(before);
    await screen.findByText(/Limit output exceeded/, {}, { timeout: 3000 });
    expect(region()).toContain('Limit output exceeded');
  });
});

describe('limits', () => {
  test('exceeded ones stand first, with value, bounds and by how much in words', async () => {
    const { user } = open(gain());
    const supply = screen.getByLabelText('Supply');
    await user.clear(supply);
    await user.type(supply, '3 V');
    const [first] = screen.getAllByRole('listitem');
    expect(first?.querySelector('.limit-name')?.textContent).toBe('output');
    const row = limitRow('output');
    // Output 2.5 V + 4.7 · 0.4 V = 4.38 V; the supply less 50 mV is 2.95 V; worked out by hand.
    expect(row.textContent).toContain('exceeded');
    expect(row.textContent).toContain('4.380\u2009V');
    expect(row.textContent).toContain('Over by 1.430\u2009V.');
    expect(row.textContent).toContain('The output cannot swing that far on this supply.');
  });

  test('a broken one names the nearest cure; trying it cures it, putting back returns the field', async () => {
    const { user } = open(gain());
    const supply = screen.getByLabelText<HTMLInputElement>('Supply');
    await user.clear(supply);
    await user.type(supply, '4.3 V{Tab}');
    await user.click(await screen.findByRole('button', { name: /^Try it: / }, { timeout: 5000 }));
    expect(limitRow('output').textContent).not.toContain('exceeded');
    const back = screen.getByRole('button', { name: 'Put back' });
    expect(document.activeElement).toBe(back);
    await user.click(back);
    expect(limitRow('output').textContent).toContain('exceeded');
    expect(document.activeElement?.textContent).toBe('Limits');
    expect(supply.value).toBe('4.3 V');
  });

  test('undoing the last step hands the focus to its way back', async () => {
    const { user } = open(gain());
    await user.type(screen.getByLabelText<HTMLInputElement>('Supply'), '0{Tab}');
    await user.click(screen.getByRole('button', { name: 'Undo' }));
    expect(document.activeElement).toBe(screen.getByRole('button', { name: 'Redo' }));
    await user.click(screen.getByRole('button', { name: 'Redo' }));
    expect(document.activeElement).toBe(screen.getByRole('button', { name: 'Undo' }));
  });
});

describe('the page', () => {
  const document = () =>
    compileText(`---
title: A page of everything
summary: One of each part.
slug: page-of-everything
hazards: [hot surface]
---

## First

A table[^1]:

| a | b |
| - | - |
| 1 | 2 |

### A part

- [x] done
- [ ] open

[outside](https://example.org) and <Recipe slug="rail-splitter" version="2" />

## Second

$$
V = R I
$$

<Caution kind="hot surface">
It gets hot.
</Caution>

<Note kind="layout">
Keep it short.
</Note>

[^1]: A footnote.
`);

  test('numbers its sections and keeps cautions, notes, maths, tables and footnotes', () => {
    open(document());
    const headings = screen.getAllByRole('heading', { level: 2 }).map((heading) => heading.textContent);
    expect(headings.slice(0, 2)).toEqual(['1 First', '2 Second']);
    expect(screen.getAllByRole('heading', { level: 3 }).map((heading) => heading.textContent)).toEqual(['1.1 A part']);
    expect(screen.getByRole('region', { name: 'Caution: Hot surface' }).textContent).toContain('It gets hot.');
    expect(screen.getByRole('complementary', { name: 'Note: layout' }).textContent).toContain('Layout. Keep it short.');
    expect(screen.getByRole('region', { name: 'Table' }).getAttribute('tabindex')).toBe('0');
    expect(window.document.querySelector('math[display="block"]')).toBeTruthy();
    expect(screen.getByText('A footnote.', { exact: false })).toBeTruthy();
    expect(screen.getByRole('link', { name: 'outside' }).getAttribute('rel')).toBe('noreferrer');
    expect(screen.getByRole('img', { name: 'done' })).toBeTruthy();
  });
});
