import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  coherentUnit,
  type Dimension,
  dimensionWords,
  KINDS,
  kindOfDimension,
  NONE,
  perDimension,
  powerOfDimension,
  type QuantityKind,
  readUnit,
  readValue,
  sameDimension,
  timesDimension,
  type WriteOptions,
  writeEntry,
  writeRange,
  writeValue,
} from '#quantity';
import { expectNear } from '../expect-near.ts';

const THIN = '\u2009';
const KIND_NAMES = Object.keys(KINDS) as QuantityKind[];

/** Expectations are typed with an ordinary space before the unit; what is written has a thin one. */
function thin(text: string): string {
  return text.replace(/ (?=[^\d\s−]\S*$)/, THIN);
}

describe('writeValue', () => {
  test.each([
    // Section 3 of the recipe language: four significant digits, engineering prefixes, 999.96 Ω is 1.000 kΩ.
    [999.96, 'resistance', '1.000 kΩ'],
    [999.94, 'resistance', '999.9 Ω'],
    [999.95, 'voltage', '1.000 kV'],
    [4.5, 'voltage', '4.500 V'],
    [-2, 'voltage', '−2.000 V'],
    [18700, 'resistance', '18.70 kΩ'],
    [1e6, 'resistance', '1.000 MΩ'],
    [4.7e-9, 'capacitance', '4.700 nF'],
    [1e-7, 'capacitance', '100.0 nF'],
    [9.9996e-7, 'capacitance', '1.000 µF'],
    [9.9995e-7, 'current', '1.000 µA'],
    [1e-15, 'current', '1.000 fA'],
    [999.4e12, 'resistance', '999.4 TΩ'],
    [7e-9, 'voltage-noise', '7.000 nV/√Hz'],
    [2e6, 'slew-rate', '2.000 V/µs'],
    [5e-6, 'voltage-drift', '5.000 µV/K'],
    [62, 'thermal-resistance', '62.00 K/W'],
    [2.5e-5, 'temperature-coefficient', '25.00 ppm/K'],
    // Beyond the prefixes.
    [1e-17, 'voltage', '1.000×10⁻¹⁷ V'],
    [-2.5e18, 'resistance', '−2.500×10¹⁸ Ω'],
    // No prefix on a ratio, a level, a temperature, an angle.
    [1.25, 'ratio', '1.250'],
    [12345, 'ratio', '12350'],
    [1234567, 'ratio', '1.235×10⁶'],
    [0.00012346, 'ratio', '0.0001235'],
    [0.000012346, 'ratio', '1.235×10⁻⁵'],
    [66.0206, 'level', '66.02 dB'],
    [298.15, 'temperature', '25.00 °C'],
    [233.15, 'temperature', '−40.00 °C'],
    [1250, 'temperature-difference', '1250 K'],
    [1000, 'count', '1000'],
    [123456789, 'count', '123456789'],
    // Zero has no sign and no prefix.
    [0, 'voltage', '0 V'],
    [-0, 'voltage', '0 V'],
    [273.15, 'temperature', '0 °C'],
    [-0.0001, 'level', '0.000 dB'],
    // Levels beyond ±200 dB in words.
    [200, 'level', '200.0 dB'],
    [200.1, 'level', 'above 200 dB'],
    [-320, 'level', 'below −200 dB'],
  ] as const)('%d as %s is %s', (si, kind, text) => {
    expect(writeValue(si, { kind }).text).toBe(thin(text));
  });

  test('an angle has no space before its sign; % has one (SI brochure, 9th edition, 5.4.3 and 5.4.7)', () => {
    expect(writeValue(Math.PI / 4, { kind: 'angle' }).text).toBe('45.00°');
    expect(writeValue(0.001, { kind: 'ratio', unit: '%' }).text).toBe(`0.1000${THIN}%`);
  });

  test('number, unit and text are three views of one answer', () => {
    expect(writeValue(-1234, { kind: 'voltage' })).toEqual({ number: '−1.234', unit: 'kV', text: `−1.234${THIN}kV` });
    expect(writeValue(2, { kind: 'ratio' })).toEqual({ number: '2.000', unit: '', text: '2.000' });
  });

  test.each([
    // si, unit asked for, text
    [0.0023, 'voltage', 'mV', '2.300 mV'],
    [2.3, 'voltage', 'mV', '2300 mV'],
    [1e-6, 'voltage', 'V', '1.000×10⁻⁶ V'],
    [0.05, 'ratio', 'ppm', '50000 ppm'],
    [298.15, 'temperature', 'K', '298.1 K'],
    [10, 'temperature-difference', '°C', '10.00 °C'],
    [3.6e6, 'energy', 'kWh', '1.000 kWh'],
    [4e5, 'slew-rate', 'V/ms', '400.0 V/ms'],
    [0.5, 'angle', 'rad', '0.500 rad'],
  ] as const)('%d as %s in %s is %s', (si, kind, unit, text) => {
    expect(writeValue(si, { kind, unit }).text).toBe(thin(text));
  });

  test('digits are as many as asked for', () => {
    expect(writeValue(473, { kind: 'resistance', digits: 1 }).text).toBe(thin('500 Ω'));
    expect(writeValue(473, { kind: 'resistance', digits: 2 }).text).toBe(thin('470 Ω'));
    expect(writeValue(4730, { kind: 'resistance', digits: 6 }).text).toBe(thin('4.73000 kΩ'));
    expect(writeValue(46.0206, { kind: 'level', digits: 3 }).text).toBe(thin('46.0 dB'));
  });

  test('a dimension without a name takes its coherent unit, without prefixes', () => {
    expect(writeValue(2.5, { kind: null, unit: 'V²/Hz' }).text).toBe(thin('2.500 V²/Hz'));
    expect(writeValue(1e-13, { kind: null, unit: 'V²/Hz' }).text).toBe(thin('1.000×10⁻¹³ V²/Hz'));
    expect(writeValue(3, { kind: null, unit: '' }).text).toBe('3.000');
  });

  test.each([
    [Math.SQRT2, 'rms', undefined, '1.000 V'],
    [1, 'peak', undefined, '1.000 V'],
    [1, 'peak-to-peak', undefined, '2.000 V'],
    // 0 dBu = 0.7746 V, +4 dBu = 1.2277 V RMS (definition).
    [0.774597 * Math.SQRT2, 'rms', 'dBu', '0.000 dBu'],
    [1.2277 * Math.SQRT2, 'rms', 'dBu', '4.000 dBu'],
    [Math.SQRT2 / 10, 'rms', 'dBV', '−20.00 dBV'],
    [0, 'rms', 'dBV', 'below −200 dBV'],
  ] as const)('a peak of %d V under %s, in %s, is %s', (si, reading, unit, text) => {
    expect(writeValue(si, { kind: 'voltage', reading, unit }).text).toBe(thin(text));
  });

  test('what is not finite is told in words', () => {
    expect(writeValue(Number.NaN, { kind: 'voltage' }).text).toBe('no value');
    expect(writeValue(Number.NEGATIVE_INFINITY, { kind: 'level' }).text).toBe('unbounded');
  });
});

describe('writeRange and writeEntry', () => {
  test.each([
    // low, high, kind, text; the first pair is the worked example of the design document.
    [2.00667, 6.99333, 'voltage', '2.007 … 6.993 V'],
    [-2, 2, 'voltage', '−2.000 … 2.000 V'],
    [0, 6.99333, 'voltage', '0.000 … 6.993 V'],
    [-0.0123, 6.99333, 'voltage', '−0.012 … 6.993 V'],
    [998, 1001, 'resistance', '0.998 … 1.001 kΩ'],
    [233.15, 358.15, 'temperature', '−40.00 … 85.00 °C'],
    [34.1, 66.02, 'level', '34.10 … 66.02 dB'],
    [1.2, 1.25, 'ratio', '1.200 … 1.250'],
    [3, 12, 'count', '3 … 12'],
  ] as const)('%d to %d as %s is %s', (low, high, kind, text) => {
    expect(writeRange(low, high, { kind }).text).toBe(thin(text));
  });

  test('each end has its own unit where one would leave the smaller without digits', () => {
    expect(writeRange(1e-6, 5, { kind: 'voltage' })).toEqual({
      low: `1.000${THIN}µV`,
      high: `5.000${THIN}V`,
      unit: '',
      text: `1.000${THIN}µV … 5.000${THIN}V`,
    });
    expect(writeRange(66, 250, { kind: 'level' }).text).toBe(`66.00${THIN}dB … above 200${THIN}dB`);
  });

  test('ends that read the same are written once', () => {
    expect(writeRange(5, 5, { kind: 'voltage' }).text).toBe(thin('5.000 V'));
    expect(writeRange(1, 1.00001, { kind: 'voltage' }).text).toBe(thin('1.000 V'));
  });

  test('a field has “to” between its ends', () => {
    expect(writeEntry({ low: -2, high: 2 }, { kind: 'voltage' })).toBe(thin('−2.000 to 2.000 V'));
    expect(writeEntry({ low: 4.5, high: 4.5 }, { kind: 'voltage' })).toBe(thin('4.500 V'));
    expect(writeEntry({ low: -0.002, high: 0.002 }, { kind: 'voltage', unit: 'V' })).toBe(
      thin('−0.002000 to 0.002000 V'),
    );
  });
});

describe('written and read back', () => {
  const kinds = fc.constantFrom(...KIND_NAMES.filter((kind) => kind !== 'count' && kind !== 'temperature'));
  const sizes = fc.double({ min: -1e25, max: 1e25, noNaN: true }).filter((x) => x === 0 || Math.abs(x) > 1e-25);

  function readBack(text: string, kind: QuantityKind, unit: string): readonly [number, number] {
    const result = readValue(text, { kind, unit });
    if (!result.ok) throw new Error(`${text}: ${result.error.code}`);
    return [result.value.low, result.value.high];
  }

  test('a plain text gives the same number, within a few last bits', () => {
    fc.assert(
      fc.property(kinds, sizes, (kind, si) => {
        expectNear(readBack(writeValue(si, { kind, plain: true }).text, kind, 'required')[0], si, 1e-15);
      }),
    );
  });

  test('a plain range gives both ends', () => {
    fc.assert(
      fc.property(kinds, sizes, sizes, (kind, a, b) => {
        const [low, high] = [Math.min(a, b), Math.max(a, b)];
        const back = readBack(writeEntry({ low, high }, { kind, plain: true }), kind, 'required');
        expectNear(back[0], low, 1e-15);
        expectNear(back[1], high, 1e-15);
      }),
    );
  });

  test('a temperature comes back within a few millionths of a millikelvin, a count exactly', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.001, max: 1e5, noNaN: true }), fc.nat(), (kelvin, count) => {
        const back = readBack(
          writeValue(kelvin, { kind: 'temperature', plain: true }).text,
          'temperature',
          'required',
        )[0];
        expect(Math.abs(back - kelvin)).toBeLessThan(1e-10);
        expect(readBack(writeValue(count, { kind: 'count' }).text, 'count', 'required')[0]).toBe(count);
      }),
    );
  });

  test('what a field shows is read by that field, to the digits shown', () => {
    const usual = fc.double({ min: 1e-14, max: 1e14, noNaN: true });
    const prefixed = fc.constantFrom<QuantityKind>(
      'voltage',
      'resistance',
      'capacitance',
      'frequency',
      'voltage-noise',
    );
    fc.assert(
      fc.property(prefixed, usual, usual, (kind, a, b) => {
        const [low, high] = [Math.min(a, b), Math.max(a, b)];
        const [first, second] = readBack(writeEntry({ low, high }, { kind }), kind, KINDS[kind].unit);
        expectNear(first, low, 0.06);
        expectNear(second, high, 5.1e-4);
      }),
    );
  });

  test('readings come back as the same peak', () => {
    const cases = fc.constantFrom<Pick<WriteOptions, 'reading' | 'unit'>>(
      { reading: 'rms' },
      { reading: 'peak-to-peak' },
      { reading: 'rms', unit: 'dBu' },
      { reading: 'rms', unit: 'dBV' },
    );
    fc.assert(
      fc.property(cases, fc.double({ min: 1e-6, max: 1e3, noNaN: true }), (shown, peak) => {
        const text = writeValue(peak, { kind: 'voltage', ...shown, plain: true }).text;
        const result = readValue(text, { kind: 'voltage', unit: 'required', reading: shown.reading });
        expectNear(result.ok ? result.value.low : Number.NaN, peak, 1e-12);
      }),
    );
  });

  test('no text makes reading throw, or gives a number that is not finite', () => {
    const pieces = fc.constantFrom(
      '1',
      '.',
      ',',
      '-',
      '−',
      '±',
      ' ',
      ' to ',
      'e9',
      '999',
      'k',
      'K',
      'M',
      'V',
      'Ω',
      '°C',
      '%',
      '/',
      '√Hz',
      '²',
      'dBu',
      '…',
      '\u2009',
      '🔧',
    );
    const texts = fc.oneof(
      fc.string(),
      fc.string({ unit: 'binary' }),
      fc.array(pieces, { maxLength: 12 }).map((some) => some.join('')),
    );
    fc.assert(
      fc.property(
        texts,
        fc.constantFrom(...KIND_NAMES),
        fc.constantFrom('required', '', 'V', 'nonsense'),
        (text, kind, unit) => {
          const result = readValue(text, { kind, unit, reading: 'rms', decimalComma: true });
          if (result.ok) {
            expect(Number.isFinite(result.value.low) && Number.isFinite(result.value.high)).toBe(true);
            expect(result.value.low).toBeLessThanOrEqual(result.value.high);
          } else {
            const { start, end } = result.error.span;
            expect(start >= 0 && start <= end && end <= text.length).toBe(true);
          }
        },
      ),
      { numRuns: 2000 },
    );
  });

  test.each([' ', '1', '±', '√', 'k', '1 to ', '·V', '/V', '²', '\u2126'])(
    '100,000 times “%s” is refused, not searched',
    (piece) => {
      const text = `1${piece.repeat(100_000)}V`;
      expect(readValue(text, { kind: 'voltage', unit: 'V' }).ok).toBe(false);
      expect(readUnit(text)).toBeNull();
    },
  );

  test('no number makes writing throw or write -0, NaN or Infinity', () => {
    fc.assert(
      fc.property(
        fc.double(),
        fc.double(),
        fc.constantFrom(...KIND_NAMES),
        fc.integer({ min: -3, max: 30 }),
        (a, b, kind, digits) => {
          for (const text of [
            writeValue(a, { kind, digits }).text,
            writeRange(Math.min(a, b), Math.max(a, b), { kind, digits }).text,
          ]) {
            expect(text).not.toMatch(/NaN|Infinity|undefined|-/);
            expect(text).not.toMatch(/−0(?:\.0*)?(?![.\d])/);
          }
        },
      ),
      { numRuns: 1000 },
    );
  });
});

describe('dimensions', () => {
  const [volt, ohm, second, hertz] = (['voltage', 'resistance', 'time', 'frequency'] as const).map(
    (kind) => KINDS[kind].dimension,
  );
  const [V, Ohm, s, Hz] = [volt ?? NONE, ohm ?? NONE, second ?? NONE, hertz ?? NONE];

  test('products, quotients and powers add, subtract and multiply exponents', () => {
    expect(perDimension(V, Ohm)).toEqual(KINDS.current.dimension);
    expect(timesDimension(s, Hz)).toEqual(NONE);
    expect(powerOfDimension(V, 2)).toEqual([4, 8, -12, -4, 0, 0]);
    expect(powerOfDimension(Hz, 0.5)).toEqual([0, 0, -1, 0, 0, 0]);
  });

  test('a power that would leave a fraction of a half is refused', () => {
    expect(powerOfDimension([0, 0, -1, 0, 0, 0], 0.5)).toBeNull();
    expect(powerOfDimension(V, 1 / 3)).toBeNull();
    expect(powerOfDimension(V, Number.NaN)).toBeNull();
  });

  test('no exponent is ever -0', () => {
    for (const d of [powerOfDimension(V, -1), perDimension(NONE, V), powerOfDimension(V, 0)]) {
      expect(d?.some((exponent) => Object.is(exponent, -0))).toBe(false);
    }
  });

  test.each([
    [V, 'voltage'],
    [Ohm, 'resistance'],
    [NONE, 'ratio'],
    [KINDS.level.dimension, 'level in dB'],
    [KINDS.temperature.dimension, 'temperature'],
    [timesDimension(V, Ohm), 'V·Ω'],
  ] as const)('%j is called %s', (d, words) => {
    expect(dimensionWords(d)).toBe(words);
  });

  test('the first choice of quantity is a ratio without dimension and a difference in kelvins, unless the unit says more', () => {
    expect(kindOfDimension(NONE)).toBe('ratio');
    expect(kindOfDimension(NONE, '°')).toBe('angle');
    expect(kindOfDimension(NONE, '%')).toBe('ratio');
    expect(kindOfDimension(KINDS.temperature.dimension)).toBe('temperature-difference');
    expect(kindOfDimension(KINDS.temperature.dimension, '°C')).toBe('temperature');
    expect(kindOfDimension(timesDimension(V, V))).toBeNull();
  });

  test.each([
    [[4, 8, -10, -4, 0, 0], 'V²/Hz'],
    [[2, 2, -2, 0, 0, 0], 'kg·m/s'],
    [timesDimension(V, s), 'V·s'],
    [timesDimension(V, V), 'V²'],
    [perDimension(NONE, V), 'V⁻¹'],
    [perDimension(Hz, V), 'Hz/V'],
    [[1, 2, -3, -1, 0, 0], '√V'],
    [[2, 4, -5, -2, 0, 0], 'V/√Hz'],
    [[0, 4, 0, 0, 0, 0], 'm²'],
    [NONE, ''],
    [KINDS.temperature.dimension, 'K'],
    [KINDS['slew-rate'].dimension, 'V/s'],
  ] as const)('the coherent unit of %j is %s', (d, unit) => {
    expect(coherentUnit(d)).toBe(unit);
  });

  test('the coherent unit of any dimension is read back as that dimension, with factor 1', () => {
    const exponent = fc.integer({ min: -12, max: 12 });
    const dimensions = fc.tuple(
      exponent,
      exponent,
      exponent,
      exponent,
      exponent,
      exponent,
    ) satisfies fc.Arbitrary<Dimension>;
    fc.assert(
      fc.property(dimensions, (d) => {
        fc.pre(!sameDimension(d, NONE));
        const unit = readUnit(coherentUnit(d));
        expect(unit?.dimension, coherentUnit(d)).toEqual(d);
        expect(unit?.factor).toBe(1);
      }),
    );
  });
});
