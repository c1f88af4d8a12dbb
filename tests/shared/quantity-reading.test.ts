import { describe, expect, test } from 'vitest';
import {
  KINDS,
  PREFIXES,
  QUANTITY_WORDING,
  type QuantityKind,
  type ReadOptions,
  readUnit,
  readUnitAt,
  readValue,
  sameDimension,
  toSi,
} from '#quantity';
import type { Wording } from '#text';
import { expectNear } from '../expect-near.ts';
import markings from '../reference/marking-codes.json' with { type: 'json' };

function read(text: string, kind: ReadOptions['kind'], rest: Partial<ReadOptions> = {}) {
  return readValue(text, { kind, unit: 'required', ...rest });
}

function ends(text: string, kind: ReadOptions['kind'], rest: Partial<ReadOptions> = {}): readonly [number, number] {
  const result = read(text, kind, rest);
  if (!result.ok) throw new Error(`${text}: ${result.error.code}`);
  return [result.value.low, result.value.high];
}

/** The code and the piece of text that is marked. */
function refusal(text: string, kind: ReadOptions['kind'], rest: Partial<ReadOptions> = {}): readonly [string, string] {
  const result = read(text, kind, rest);
  if (result.ok) throw new Error(`${text} was read as ${JSON.stringify(result.value)}`);
  const { code, span } = result.error;
  return [code, text.slice(span.start, span.end)];
}

describe('units', () => {
  // SI brochure, 9th edition (BIPM 2019), table 7.
  test.each([
    ['f', 1e-15],
    ['p', 1e-12],
    ['n', 1e-9],
    ['u', 1e-6],
    ['µ', 1e-6],
    ['\u03bc', 1e-6],
    ['m', 1e-3],
    ['k', 1e3],
    ['M', 1e6],
    ['G', 1e9],
    ['T', 1e12],
  ])('the prefix %s multiplies by %d exactly, for every unit that takes prefixes', (prefix, factor) => {
    for (const unit of ['V', 'A', 'Ω', '\u2126', 'ohm', 'S', 'F', 'H', 'Hz', 's', 'W', 'J', 'C', 'K', 'm']) {
      expect(readUnit(prefix + unit)?.factor, prefix + unit).toBe(factor);
    }
  });

  test('the table of prefixes holds ten steps and no others', () => {
    expect(Object.keys(PREFIXES)).toEqual(['f', 'p', 'n', 'µ', 'm', '', 'k', 'M', 'G', 'T']);
  });

  // SI brochure, 9th edition, table 4, third column: expression in terms of base units, here as kg m s A.
  test.each([
    ['Hz', 0, 0, -1, 0],
    ['J', 1, 2, -2, 0],
    ['W', 1, 2, -3, 0],
    ['C', 0, 0, 1, 1],
    ['V', 1, 2, -3, -1],
    ['F', -1, -2, 4, 2],
    ['Ω', 1, 2, -3, -2],
    ['S', -1, -2, 3, 2],
    ['H', 1, 2, -2, -2],
  ])('%s has the dimension kg^%i m^%i s^%i A^%i', (unit, kg, m, s, a) => {
    expect(readUnit(unit)?.dimension).toEqual([2 * kg, 2 * m, 2 * s, 2 * a, 0, 0]);
  });

  // SI brochure, 9th edition, table 8 for h and °; 5.4.7 for %; the others are products of these.
  test.each([
    ['h', 3600, 'time'],
    ['Ah', 3600, 'charge'],
    ['mAh', 3.6, 'charge'],
    ['Wh', 3600, 'energy'],
    ['kWh', 3.6e6, 'energy'],
    ['°', Math.PI / 180, 'angle'],
    ['deg', Math.PI / 180, 'angle'],
    ['mrad', 1e-3, 'angle'],
    ['%', 1e-2, 'ratio'],
    ['ppm', 1e-6, 'ratio'],
    ['ppb', 1e-9, 'ratio'],
    ['V/V', 1, 'ratio'],
    ['A/A', 1, 'ratio'],
    ['V/s', 1, 'slew-rate'],
    ['V/µs', 1e6, 'slew-rate'],
    ['V/us', 1e6, 'slew-rate'],
    ['V/√Hz', 1, 'voltage-noise'],
    ['nV/√Hz', 1e-9, 'voltage-noise'],
    ['pA/√Hz', 1e-12, 'current-noise'],
    ['K/W', 1, 'thermal-resistance'],
    ['°C/W', 1, 'thermal-resistance'],
    ['ppm/K', 1e-6, 'temperature-coefficient'],
    ['ppm/°C', 1e-6, 'temperature-coefficient'],
    ['%/K', 1e-2, 'temperature-coefficient'],
    ['V/K', 1, 'voltage-drift'],
    ['µV/°C', 1e-6, 'voltage-drift'],
    ['A/K', 1, 'current-drift'],
    ['pF/m', 1e-12, 'capacitance-per-length'],
    ['mΩ/m', 1e-3, 'resistance-per-length'],
  ] as const)('%s is %d SI units of %s', (unit, factor, kind) => {
    expectNear(readUnit(unit)?.factor ?? Number.NaN, factor, 1e-15);
    expect(sameDimension(readUnit(unit)?.dimension ?? [9, 9, 9, 9, 9, 9], KINDS[kind].dimension)).toBe(true);
    expect(readUnit(unit)?.offset).toBe(0);
  });

  test('the unit of each quantity is read and has its dimension', () => {
    for (const kind of Object.keys(KINDS) as QuantityKind[]) {
      if (KINDS[kind].unit === '') continue;
      expect(readUnit(KINDS[kind].unit)?.dimension, kind).toEqual(KINDS[kind].dimension);
    }
  });

  test('only °C alone has an offset', () => {
    expect(readUnit('°C')?.offset).toBe(273.15);
    expect(readUnit('V/°C')?.offset).toBe(0);
  });

  test('units are written with the Greek omega and the micro sign, however they were typed', () => {
    expect(readUnit('k\u2126')?.unit).toBe('k\u03a9');
    expect(readUnit('\u03bcV/us')?.unit).toBe('\u00b5V/\u00b5s');
    expect(readUnit('uohm')?.unit).toBe('\u00b5\u03a9');
  });

  test.each(['', 'k', 'X', 'm%', 'kdB', 'k°C', 'Mh', 'krad', 'cm', 'dBu', 'V/', 'V/x', '/V', 'V V', 'Ohm', '√', 'V⁰'])(
    '“%s” is no unit',
    (text) => {
      expect(readUnit(text)).toBeNull();
    },
  );

  test.each([
    // text after the number, unit, words
    ['V / t', 'V', ['V']],
    ['V/R1', 'V', ['V']],
    ['V/µs)', 'V/µs', ['V', 'µs']],
    ['V/s/K', 'V/s/K', ['V', 's', 'K']],
    ['mV+1', 'mV', ['mV']],
    ['V²/Hz', 'V²/Hz', ['V', 'Hz']],
    ['kohm*x', 'kΩ', ['kohm']],
    ['% of', '%', ['%']],
  ])('after a number, “%s” gives the unit %s and tells its words', (text, unit, words) => {
    const found = readUnitAt(`12${text}`, 2);
    expect(found?.unit).toBe(unit);
    expect(found?.words).toEqual(words);
  });

  test.each(['V1', 'V_s', 'mVx', 'R1', 'sqrt(2)', '*V', ' V', ''])('“%s” starts with no unit', (text) => {
    expect(readUnitAt(text, 0)).toBeNull();
  });

  test('a factor that a double cannot hold ends the unit before it', () => {
    expect(readUnitAt('TV⁹⁹', 0)).toBeNull();
    expect(readUnitAt('V·TV⁹·TV⁹·TV⁹·TV⁹', 0)?.unit).toBe('V·TV⁹·TV⁹');
  });

  test('decimal prefixes are applied to the text, so that 4.7 nF is the number written 4.7e-9', () => {
    for (const [digits, unit, expected] of [
      ['4.7', 'nF', 4.7e-9],
      ['0.1', 'µF', 1e-7],
      ['33', 'pF', 33e-12],
      ['1e-3', 'kΩ', 1],
    ] as const) {
      expect(toSi(digits, readUnit(unit) ?? { factor: Number.NaN, offset: 0 })).toBe(expected);
    }
  });
});

describe('readValue, a single value', () => {
  test.each([
    // The examples of section 3 of the recipe language.
    ['10 kΩ', 'resistance', 1e4],
    ['4.7 nF', 'capacitance', 4.7e-9],
    ['0.05 %', 'ratio', 5e-4],
    ['66 dB', 'level', 66],
    ['7 nV/√Hz', 'voltage-noise', 7e-9],
    ['2 V/µs', 'slew-rate', 2e6],
    ['85 °C', 'temperature', 358.15],
    ['1.25', 'ratio', 1.25],
    ['8', 'count', 8],
    // Signs, exponents, spaces.
    ['-2 V', 'voltage', -2],
    ['−2 V', 'voltage', -2],
    ['+2V', 'voltage', 2],
    ['  2 V  ', 'voltage', 2],
    ['2\u2009V', 'voltage', 2],
    ['2\u00a0V', 'voltage', 2],
    ['2\u202fV', 'voltage', 2],
    ['1e3 V', 'voltage', 1e3],
    ['1E-6 A', 'current', 1e-6],
    ['1e−6 A', 'current', 1e-6],
    ['.5 V', 'voltage', 0.5],
    ['5. V', 'voltage', 5],
    ['0 V', 'voltage', 0],
    ['-0 V', 'voltage', 0],
    // Temperatures.
    ['-273.15 °C', 'temperature', 0],
    ['300 K', 'temperature', 300],
    ['10 °C', 'temperature-difference', 10],
    ['10 K', 'temperature-difference', 10],
    // Angles need a unit, counts none.
    ['180°', 'angle', Math.PI],
    ['180 deg', 'angle', Math.PI],
    ['2 rad', 'angle', 2],
    ['100 mAh', 'charge', 360],
    ['1.5 h', 'time', 5400],
    ['3 V²/Hz', [4, 8, -10, -4, 0, 0], 3],
  ] as const)('%s as %s is %d', (text, kind, si) => {
    const [low, high] = ends(text, kind);
    expectNear(low, si, 1e-15);
    expect(high).toBe(low);
    expect(Object.is(low, -0)).toBe(false);
  });

  test('the unit is given back with its prefix, as the next bare number will take it', () => {
    const units = (['10 kohm', '4k7', '33R', '2u2', '5'] as const).map((text, i) => {
      const result = read(text, i === 3 ? 'capacitance' : i === 4 ? 'ratio' : 'resistance');
      return result.ok ? result.value.unit : result.error.code;
    });
    expect(units).toEqual(['kΩ', 'kΩ', 'Ω', 'µF', '']);
  });

  describe(`marking codes of ${markings.source}`, () => {
    const kindOf = { Ω: 'resistance', F: 'capacitance' } as const;
    const [plain, withTolerance] = [false, true].map((has) =>
      markings.codes.filter(({ code }) => /(?:[RKLMGTkpnuµ\u03bcm].*[A-Z])$/.test(code) === has),
    );

    test('give the values of the standard, but for a last capital K', () => {
      expect(plain?.length).toBeGreaterThan(25);
      for (const { code, value, unit } of plain ?? []) {
        const kind = kindOf[unit === 'F' ? 'F' : 'Ω'];
        if (/^\d+K$/.test(code)) expect(refusal(code, kind)).toEqual(['prefix-case', code]);
        else expectNear(ends(code, kind)[0], value, 0);
      }
    });

    test('with a tolerance letter are refused, as a tolerance has its own attribute', () => {
      expect(withTolerance?.length).toBeGreaterThan(6);
      for (const { code, unit } of withTolerance ?? []) {
        expect(refusal(code, kindOf[unit === 'F' ? 'F' : 'Ω'])[0]).toMatch(/unit-unknown|not-a-number/);
      }
    });
  });

  test.each([
    ['10k', 'resistance', 1e4],
    ['2u2', 'inductance', 2.2e-6],
    ['100n', 'inductance', 1e-7],
    ['1F', 'capacitance', 1],
  ] as const)('%s as %s is %d (common practice, no source)', (text, kind, si) => {
    expect(ends(text, kind)[0]).toBe(si);
  });

  test.each([
    ['18.7k', 'resistance', 18700],
    ['.33R', 'resistance', 0.33],
    ['4.7n', 'capacitance', 4.7e-9],
    ['2.2u', 'inductance', 2.2e-6],
  ] as const)('%s ends in the letter of its prefix (common practice, no source)', (text, kind, si) => {
    expect(ends(text, kind)[0]).toBe(si);
  });

  test('in a field the letter may stand apart; in recipe text the unit is wanted', () => {
    expect(ends('10 k', 'resistance', { unit: 'Ω' })[0]).toBe(10000);
    expect(refusal('10 K', 'resistance', { unit: 'Ω' })[0]).toBe('prefix-case');
    expect(refusal('10 k', 'resistance')).toEqual(['unit-unknown', 'k']);
  });

  test('a code has one decimal sign: 1.5k2 is none', () => {
    expect(refusal('1.5k2', 'resistance')[0]).toBe('unit-unknown');
  });

  test('an exponent is no marking code and a marking code no exponent', () => {
    expect(ends('1e3 Ω', 'resistance')[0]).toBe(1000);
    expect(ends('1M0', 'resistance')[0]).toBe(1e6);
    expect(refusal('1e3', 'resistance')).toEqual(['unit-missing', '1e3']);
  });
});

describe('readValue, a range', () => {
  test.each([
    ['-2 V to 2 V', 'voltage', -2, 2],
    ['−500 mV to 2 V', 'voltage', -0.5, 2],
    ['±2 V', 'voltage', -2, 2],
    ['± 2 V', 'voltage', -2, 2],
    ['+/-2 V', 'voltage', -2, 2],
    ['5 V ± 1 V', 'voltage', 4, 6],
    ['5 V ± 100 mV', 'voltage', 4.9, 5.1],
    ['5V±1V', 'voltage', 4, 6],
    ['-40 °C to 85 °C', 'temperature', 233.15, 358.15],
    ['5 °C ± 1 °C', 'temperature', 277.15, 279.15],
    ['5 °C ± 1 K', 'temperature', 277.15, 279.15],
    ['±5 °C', 'temperature', 268.15, 278.15],
    ['1 to 3', 'ratio', 1, 3],
    ['4k7 to 10k', 'resistance', 4700, 10000],
    ['60 dB ± 3 dB', 'level', 57, 63],
    ['20 Hz to 20 kHz', 'frequency', 20, 20000],
  ] as const)('%s as %s reaches from %d to %d', (text, kind, low, high) => {
    const [a, b] = ends(text, kind);
    expectNear(a, low, 1e-15);
    expectNear(b, high, 1e-15);
  });

  test('is a range only where its ends differ', () => {
    for (const [text, isRange] of [
      ['1 V to 2 V', true],
      ['2 V to 2 V', false],
      ['±0 V', false],
      ['2 V', false],
    ] as const) {
      const result = read(text, 'voltage');
      expect(result.ok && result.value.isRange, text).toBe(isRange);
    }
  });

  test.each([
    ['2 V to -2 V', 'ends-crossed', '2 V to -2 V'],
    ['1 V to 999 mV', 'ends-crossed', '1 V to 999 mV'],
    ['5 V ± -1 V', 'deviation-negative', '-1 V'],
    ['±-2 V', 'deviation-negative', '-2 V'],
    ['5 V ± 10 %', 'unit-wrong', '%'],
    ['-2 to 2 V', 'unit-missing', '-2'],
    ['2 V to ', 'value-missing', ''],
    ['to 2 V', 'value-missing', ''],
    ['1 V … 2 V', 'unit-unknown', 'V … 2 V'],
    ['2 V ± ', 'value-missing', ''],
    ['1 V to 2 V to 3 V', 'unit-unknown', 'V to 3 V'],
    ['1 V to x V', 'not-a-number', 'x V'],
  ])('“%s” gives %s at “%s”', (text, code, at) => {
    expect(refusal(text, 'voltage')).toEqual([code, at]);
  });

  test('is refused where only a single value makes sense', () => {
    expect(refusal('1 V to 2 V', 'voltage', { mayBeRange: false })).toEqual(['range-refused', '1 V to 2 V']);
    expect(ends('2 V', 'voltage', { mayBeRange: false })).toEqual([2, 2]);
  });
});

describe('readValue, readings of a sine', () => {
  test.each([
    // A sine of 1 V RMS has a peak of √2 V and 2·√2 V from peak to peak (definition).
    ['1 V', 'rms', Math.SQRT2],
    ['1 V', 'peak', 1],
    ['1 V', 'peak-to-peak', 0.5],
    // 0 dBu = √0.6 V = 0.7746 V and 0 dBV = 1 V (definitions); +4 dBu = 1.2277 V and −10 dBV = 0.3162 V RMS.
    ['0 dBu', 'rms', 0.7746 * Math.SQRT2],
    ['+4 dBu', 'rms', 1.2277 * Math.SQRT2],
    ['-10 dBV', 'rms', 0.3162 * Math.SQRT2],
    ['0dBV', 'rms', Math.SQRT2],
  ] as const)('%s under %s is a peak of %d V', (text, reading, peak) => {
    expectNear(ends(text, 'voltage', { reading })[0], peak, 2e-4);
  });

  test('a level may be a range, and deviate by decibels', () => {
    const [low, high] = ends('+4 dBu ± 1 dB', 'voltage', { reading: 'rms' });
    expectNear(high / low, 10 ** 0.1, 1e-14);
    expect(ends('3 dBu to 5 dBu', 'voltage', { reading: 'rms' })).toEqual([low, high]);
  });

  test('levels belong to RMS voltages only', () => {
    expect(refusal('4 dBu', 'voltage')).toEqual(['level-needs-rms', 'dBu']);
    expect(refusal('4 dBu', 'voltage', { reading: 'peak' })).toEqual(['level-needs-rms', 'dBu']);
    expect(refusal('4 dBu', 'current', { reading: 'rms' })).toEqual(['unit-wrong', 'dBu']);
    expect(refusal('-1e6 dBu', 'voltage', { reading: 'rms' })).toEqual(['number-too-small', '-1e6 dBu']);
    expect(refusal('1e6 dBu', 'voltage', { reading: 'rms' })).toEqual(['number-too-large', '1e6 dBu']);
    expect(refusal('4 dB', 'voltage', { reading: 'rms' })).toEqual(['unit-wrong', 'dB']);
  });
});

describe('readValue, in a field', () => {
  test.each([
    ['4.7', 'resistance', 'kΩ', 4700, 4700],
    ['4.7 Ω', 'resistance', 'kΩ', 4.7, 4.7],
    ['-2 to 2', 'voltage', 'mV', -0.002, 0.002],
    ['-2 to 2 V', 'voltage', 'mV', -2, 2],
    ['−2.000 to 2.000\u2009V', 'voltage', 'mV', -2, 2],
    ['2.007 … 6.993 V', 'voltage', 'mV', 2.007, 6.993],
    ['±2', 'voltage', 'V', -2, 2],
    ['5 ± 1 V', 'voltage', 'mV', 4, 6],
    ['25', 'temperature', '°C', 298.15, 298.15],
    ['25 ± 1', 'temperature', '°C', 297.15, 299.15],
    ['45', 'angle', '°', Math.PI / 4, Math.PI / 4],
    ['5', 'ratio', '%', 0.05, 0.05],
    ['5', 'ratio', '', 5, 5],
    ['1 to 5 %', 'ratio', '', 0.01, 0.05],
    ['5', 'count', '', 5, 5],
  ] as const)('%s as %s, last shown in %s, is %d to %d', (text, kind, unit, low, high) => {
    const [a, b] = ends(text, kind, { unit });
    expectNear(a, low, 1e-15);
    expectNear(b, high, 1e-15);
  });

  test('a bare number takes a level last shown', () => {
    expectNear(ends('4', 'voltage', { unit: 'dBu', reading: 'rms' })[0], 1.2277 * Math.SQRT2, 5e-5);
  });

  test.each([
    ['4,7', 4700],
    ['0,470', 470],
    [',5', 500],
    ['4,7000', 4700],
    ['1234,567', 1234567],
    ['-4,7 kΩ', -4700],
    ['4,7e1', 47000],
  ])('with a decimal comma %s is %d', (text, si) => {
    expectNear(ends(text, 'resistance', { unit: 'kΩ', decimalComma: true })[0], si, 1e-15);
  });

  test.each([
    ['4,700', 'comma-unclear', '4,700'],
    ['-47,000 Ω', 'comma-unclear', '-47,000'],
    ['1,234.5', 'digit-groups', '1,234.5'],
    ['1.234,5', 'digit-groups', '1.234,5'],
    ['1,234,567', 'digit-groups', '1,234,567'],
    ['10 000', 'digit-groups', '10 000'],
  ])('with a decimal comma “%s” gives %s', (text, code, at) => {
    expect(refusal(text, 'resistance', { unit: 'Ω', decimalComma: true })).toEqual([code, at]);
  });

  test('a comma is refused where a person’s locale does not use it, and always in recipe text', () => {
    expect(refusal('4,7', 'resistance', { unit: 'kΩ' })).toEqual(['decimal-comma', '4,7']);
    expect(refusal('4,7 kΩ', 'resistance', { decimalComma: true })).toEqual(['decimal-comma', '4,7']);
  });
});

describe('readValue, refusals', () => {
  test.each([
    ['', 'voltage', 'value-missing', ''],
    ['   ', 'voltage', 'value-missing', ''],
    ['abc', 'voltage', 'not-a-number', 'abc'],
    ['V', 'voltage', 'not-a-number', 'V'],
    ['-', 'voltage', 'not-a-number', '-'],
    ['.', 'voltage', 'not-a-number', '.'],
    ['1.2.3 V', 'voltage', 'not-a-number', '1.2.3'],
    ['NaN V', 'voltage', 'not-a-number', 'NaN V'],
    ['Infinity V', 'voltage', 'not-a-number', 'Infinity V'],
    ['0x10 V', 'voltage', 'unit-unknown', 'x10 V'],
    ['1e999 V', 'voltage', 'number-too-large', '1e999 V'],
    ['1e300 TV', 'voltage', 'number-too-large', '1e300 TV'],
    ['1e-999 V', 'voltage', 'number-too-small', '1e-999 V'],
    ['1e-320 fV', 'voltage', 'number-too-small', '1e-320 fV'],
    ['1e-99999999999999999999999 V', 'voltage', 'number-too-small', '1e-99999999999999999999999 V'],
    ['1e99999999999999999999999 V', 'voltage', 'number-too-large', '1e99999999999999999999999 V'],
    [`${'1'.repeat(41)} V`, 'voltage', 'number-too-long', `${'1'.repeat(41)} V`],
    ['5', 'voltage', 'unit-missing', '5'],
    ['5', 'angle', 'unit-missing', '5'],
    ['5', 'level', 'unit-missing', '5'],
    ['10  kΩ', 'resistance', 'too-many-spaces', '10  kΩ'],
    ['10\tkΩ', 'resistance', 'too-many-spaces', '10\tkΩ'],
    ['10K', 'resistance', 'prefix-case', '10K'],
    ['10 K', 'resistance', 'prefix-case', '10 K'],
    ['10 KΩ', 'resistance', 'prefix-case', 'KΩ'],
    ['10 khz', 'frequency', 'prefix-case', 'khz'],
    ['10 mhz', 'frequency', 'unit-unknown', 'mhz'],
    ['10 k', 'resistance', 'unit-unknown', 'k'],
    ['5 bananas', 'voltage', 'unit-unknown', 'bananas'],
    ['5 A', 'voltage', 'unit-wrong', 'A'],
    ['5 dB', 'ratio', 'unit-wrong', 'dB'],
    ['5 °', 'ratio', 'unit-wrong', '°'],
    ['5 %', 'angle', 'unit-wrong', '%'],
    ['100 rad/s', 'frequency', 'unit-wrong', 'rad/s'],
    ['3.5', 'count', 'not-whole', '3.5'],
    ['3 %', 'count', 'unit-wrong', '%'],
    ['-274 °C', 'temperature', 'below-absolute-zero', '-274 °C'],
    ['10 000 Ω', 'resistance', 'digit-groups', '10 000 Ω'],
    ['2 V', [4, 8, -10, -4, 0, 0], 'unit-wrong', 'V'],
  ] as const)('“%s” as %s gives %s at “%s”', (text, kind, code, at) => {
    expect(refusal(text, kind)).toEqual([code, at]);
  });

  function words(text: string, kind: ReadOptions['kind']): readonly [string, string | undefined] {
    const result = read(text, kind);
    if (result.ok) throw new Error(`${text} was read`);
    const wording: Wording = QUANTITY_WORDING[result.error.code];
    return [wording.message(result.error.facts), wording.hint?.(result.error.facts)];
  }

  test.each([
    ['10K', 'resistance', 'In “10K” a capital and a small letter are exchanged.', 'Write 10k.'],
    ['5 A', 'voltage', 'A measures a current, but a voltage is needed here.', 'Expected a unit such as V.'],
    [
      '100 rad/s',
      'frequency',
      'rad/s measures an angular frequency, but a frequency is needed here.',
      'Expected a unit such as Hz.',
    ],
    ['5', 'inductance', '5 has no unit, but an inductance needs one.', 'Write 5 H, for example.'],
    ['10 mhz', 'frequency', 'There is no unit “mhz”.', 'Write mHz or MHz.'],
    ['10 k', 'resistance', 'There is no unit “k”.', 'Write kΩ.'],
    ['4,7 kΩ', 'resistance', '4,7 has a decimal comma, but a decimal point is needed here.', 'Write 4.7.'],
    [
      '1,234.5 V',
      'voltage',
      '1,234.5 has its digits in groups, but a number is written without gaps.',
      'Write 1234.5.',
    ],
    ['2 V to 1 V', 'voltage', 'The range starts at 2 V, which is above its end, 1 V.', 'Write 1 V to 2 V.'],
  ] as const)('“%s” as %s is told in words', (text, kind, message, hint) => {
    expect(words(text, kind)).toEqual([message, hint]);
  });
});
