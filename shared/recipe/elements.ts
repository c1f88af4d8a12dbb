import { KINDS } from '#quantity';
import { HAZARDS } from './document.ts';

/** What an element may hold between its tags. */
export type Holds = 'nothing' | 'elements' | 'prose';

/** How the text of an attribute is read. */
export type AttributeReader =
  /** Words for people. */
  | 'text'
  /** A name of the calculator that is made here. */
  | 'name'
  /** Something that is named elsewhere. */
  | 'reference'
  /** A value or, where it may swing, a range. */
  | 'value'
  | 'formula'
  /** One of `values`. */
  | 'choice'
  | 'number';

export interface AttributeRow {
  readonly reader: AttributeReader;
  readonly required?: true;
  /** The words that may stand, for `choice`. */
  readonly values?: readonly string[];
  /** Read, but not available in this release. */
  readonly later?: true;
  readonly help: string;
}

export interface ElementRow {
  readonly holds: Holds;
  /** `page`: on lines of its own; `text`: also in a sentence; else the element it must stand in. */
  readonly inside: 'page' | 'text' | 'Calculator' | 'Example' | 'Drawing';
  readonly later?: true;
  readonly help: string;
  readonly attributes: Readonly<Record<string, AttributeRow>>;
}

const READINGS = ['rms', 'peak', 'peak-to-peak'];
export const LIMIT_STATES = ['within', 'close', 'only nominally', 'exceeded', 'no value'] as const;

/** How a value spreads: shared by Given and Choose. */
const UNCERTAINTY = {
  tolerance: { reader: 'formula', help: 'How far the value may be off: 1 %, a formula, or in its own unit.' },
  spread: { reader: 'choice', values: ['uniform', 'normal'], help: 'How values lie within the tolerance.' },
  group: { reader: 'text', help: 'Parts of one group drift together.' },
  match: { reader: 'formula', help: 'How well any two of the group agree.' },
  tempco: { reader: 'formula', help: 'Change with temperature, such as 25 ppm/K.' },
  track: { reader: 'formula', help: 'How far the temperature coefficients of the group differ.' },
} as const satisfies Record<string, AttributeRow>;

const note = { reader: 'text', help: 'A short remark beside the value.' } as const;

const PART_FORMULAS = [
  'value',
  'amplitude',
  'phase',
  'gain',
  'gain_bandwidth',
  'offset',
  'bias',
  'cmrr',
  'output_resistance',
  'noise_voltage',
  'noise_current',
  'input_low',
  'input_high',
  'swing_low',
  'swing_high',
  'slew',
  'position',
  'closed',
  'fitted',
];

const TABLE = {
  Calculator: {
    holds: 'elements',
    inside: 'page',
    help: 'A live calculator: its inputs, results, limits and examples.',
    attributes: {
      id: { reader: 'reference', required: true, help: 'A short name, unique on the page; used in amp.V_out.' },
      title: { reader: 'text', required: true, help: 'The heading above the inputs.' },
    },
  },
  Given: {
    holds: 'nothing',
    inside: 'Calculator',
    help: 'An input that the reader may change.',
    attributes: {
      name: { reader: 'name', required: true, help: 'The name that formulas use.' },
      label: { reader: 'text', required: true, help: 'What stands beside the field.' },
      quantity: {
        reader: 'choice',
        required: true,
        values: Object.keys(KINDS),
        help: 'What kind of quantity it is; it fixes the units that are read.',
      },
      value: { reader: 'value', required: true, help: 'The value to start with: 10 kΩ, or a range such as ±2 V.' },
      min: { reader: 'value', help: 'The least that the field takes.' },
      max: { reader: 'value', help: 'The most that the field takes.' },
      ...UNCERTAINTY,
      options: { reader: 'text', help: 'A list to choose from: 2: two-wire; 4: four-wire.' },
      reading: { reader: 'choice', values: READINGS, help: 'How a swinging voltage or current is typed.' },
      from: { reader: 'reference', help: 'A value of an earlier calculator: divider.R2.' },
      part: { reader: 'text', later: true, help: 'The kind of part whose figures fill this in.' },
      field: { reader: 'text', help: 'The figure of the part.' },
      means: { reader: 'text', help: 'The role it plays when people search by need.' },
      note,
    },
  },
  Choose: {
    holds: 'nothing',
    inside: 'Calculator',
    later: true,
    help: 'Values chosen from a preferred series.',
    attributes: {
      name: { reader: 'name', help: 'The name of one chosen value.' },
      names: { reader: 'text', help: 'The names of several, chosen together.' },
      label: { reader: 'text', required: true, help: 'What stands beside the values.' },
      series: { reader: 'text', required: true, help: 'E24, E96, exact …; several separated by |.' },
      near: { reader: 'formula', help: 'The value to come near to.' },
      round: { reader: 'choice', values: ['nearest', 'up', 'down'], help: 'Which way to round.' },
      within: { reader: 'text', help: 'The lowest and the highest value, two formulas separated by a comma.' },
      best: { reader: 'formula', help: 'What the combination should make small.' },
      keep: { reader: 'number', help: 'How many combinations are offered.' },
      twins: { reader: 'text', help: 'Parts of the same nominal value: R3: R1; R4: R2.' },
      ...UNCERTAINTY,
      note,
    },
  },
  Result: {
    holds: 'nothing',
    inside: 'Calculator',
    help: 'A number that is worked out.',
    attributes: {
      name: { reader: 'name', required: true, help: 'The name that other formulas use.' },
      label: { reader: 'text', required: true, help: 'What stands beside the number.' },
      formula: { reader: 'formula', help: 'How it is worked out.' },
      measure: { reader: 'text', later: true, help: 'What is read from the solved drawing: V(out).' },
      unit: { reader: 'text', help: 'The unit to show it in: mV.' },
      digits: { reader: 'number', help: 'Significant digits, 1 to 12.' },
      reading: { reader: 'choice', values: READINGS, help: 'How a swinging voltage or current is shown.' },
      drawing: { reader: 'reference', help: 'The drawing that is measured, if there are several.' },
      where: { reader: 'text', later: true, help: 'Inputs as they are for this measurement only.' },
      frequency: { reader: 'formula', later: true, help: 'The frequency of the measurement.' },
      agree: { reader: 'value', help: 'How far formula and drawing may differ: 2 %.' },
      means: { reader: 'text', help: 'The role it plays when people search by need.' },
      note,
    },
  },
  Limit: {
    holds: 'nothing',
    inside: 'Calculator',
    help: 'What must hold for the results to be worth anything.',
    attributes: {
      name: { reader: 'text', required: true, help: 'A short name, unique in the calculator.' },
      of: { reader: 'formula', required: true, help: 'What is judged.' },
      from: { reader: 'formula', help: 'The least it may be.' },
      to: { reader: 'formula', help: 'The most it may be.' },
      says: { reader: 'text', required: true, help: 'What it means when it is broken.' },
      near: { reader: 'formula', help: 'A smaller margin than this counts as close.' },
      level: { reader: 'choice', values: ['stop', 'caution'], help: 'stop: no result is shown as good.' },
      over: { reader: 'choice', values: ['nominal'], help: 'Judge it at the nominal values only.' },
    },
  },
  Example: {
    holds: 'elements',
    inside: 'Calculator',
    help: 'A worked example that is run at every compile.',
    attributes: {
      title: { reader: 'text', required: true, help: 'What the example shows.' },
      source: {
        reader: 'reference',
        required: true,
        help: 'An id of the sources, own arithmetic, common practice or from memory.',
      },
    },
  },
  Set: {
    holds: 'nothing',
    inside: 'Example',
    help: 'An input as it is in this example.',
    attributes: {
      name: { reader: 'reference', required: true, help: 'The input, or R1.tolerance.' },
      to: { reader: 'value', required: true, help: 'Its value or range.' },
    },
  },
  Expect: {
    holds: 'nothing',
    inside: 'Example',
    help: 'What must come out.',
    attributes: {
      name: { reader: 'reference', help: 'The result.' },
      limit: { reader: 'reference', help: 'The limit.' },
      to: { reader: 'value', help: 'The number that the result must have.' },
      state: { reader: 'choice', values: LIMIT_STATES, help: 'The state that the limit must have.' },
      at: { reader: 'text', help: 'Where in the spread: worst low, worst high, p1.' },
      within: { reader: 'value', help: 'The allowance: 0.1 % unless said, or in the unit of the result.' },
    },
  },
  Plot: {
    holds: 'nothing',
    inside: 'Calculator',
    later: true,
    help: 'Results drawn against an input.',
    attributes: {
      of: { reader: 'text', required: true, help: 'One or several results.' },
      against: { reader: 'reference', required: true, help: 'The input along the axis.' },
      from: { reader: 'value', required: true, help: 'Where the axis starts.' },
      to: { reader: 'value', required: true, help: 'Where the axis ends.' },
      scale: { reader: 'choice', values: ['log-x', 'log-y', 'log-log'], help: 'Logarithmic axes.' },
      points: { reader: 'number', help: 'How many points are worked out.' },
    },
  },
  Value: {
    holds: 'nothing',
    inside: 'text',
    help: 'A live number in a sentence.',
    attributes: {
      of: { reader: 'reference', required: true, help: 'Calculator and name: amp.V_out.' },
      at: {
        reader: 'choice',
        values: ['low', 'middle', 'high', 'worst low', 'worst high'],
        help: 'Which number of a range.',
      },
    },
  },
  Recipe: {
    holds: 'nothing',
    inside: 'text',
    help: 'A link to another recipe.',
    attributes: {
      slug: { reader: 'reference', required: true, help: 'The slug of the other recipe.' },
      version: { reader: 'number', help: 'One version of it; without it always the newest.' },
    },
  },
  Use: {
    holds: 'nothing',
    inside: 'page',
    later: true,
    help: 'Takes the results of another published recipe.',
    attributes: {
      slug: { reader: 'reference', required: true, help: 'The slug of the other recipe.' },
      version: { reader: 'number', required: true, help: 'Its version.' },
      as: { reader: 'name', required: true, help: 'The name it has here.' },
    },
  },
  Figure: {
    holds: 'nothing',
    inside: 'page',
    later: true,
    help: 'A picture from the uploads.',
    attributes: {
      upload: { reader: 'reference', required: true, help: 'The upload.' },
      alt: { reader: 'text', required: true, help: 'What the picture shows, in words.' },
      caption: { reader: 'text', required: true, help: 'The line below it.' },
    },
  },
  Note: {
    holds: 'prose',
    inside: 'page',
    help: 'A remark set apart.',
    attributes: {
      kind: {
        reader: 'choice',
        values: ['layout', 'measuring'],
        help: 'Notes of these kinds are printed on design sheets.',
      },
    },
  },
  Caution: {
    holds: 'prose',
    inside: 'page',
    help: 'What can hurt, one for each hazard of the front matter.',
    attributes: { kind: { reader: 'choice', required: true, values: HAZARDS, help: 'The hazard.' } },
  },
  Drawing: {
    holds: 'elements',
    inside: 'page',
    later: true,
    help: 'The circuit on a grid.',
    attributes: {
      id: { reader: 'reference', required: true, help: 'A short name, unique on the page.' },
      title: { reader: 'text', required: true, help: 'The line below the drawing.' },
      calculator: { reader: 'reference', help: 'The calculator whose names its parts use.' },
    },
  },
  Part: {
    holds: 'nothing',
    inside: 'Drawing',
    later: true,
    help: 'A part of the circuit.',
    attributes: {
      kind: { reader: 'text', required: true, help: 'resistor, op amp, terminal …' },
      name: { reader: 'text', help: 'R1, U1 …' },
      from: { reader: 'text', help: 'Where its first terminal stands: 4,2.' },
      to: { reader: 'text', help: 'Where its second terminal stands.' },
      at: { reader: 'text', help: 'Where it stands.' },
      turn: { reader: 'choice', values: ['0', '90', '180', '270'], help: 'Turned by so many degrees.' },
      flip: { reader: 'choice', values: ['yes'], help: 'Mirrored.' },
      tap: { reader: 'text', help: 'Where the wiper stands.' },
      same: { reader: 'choice', values: ['yes'], help: 'It is the same part as another of this value.' },
      pins: { reader: 'text', help: 'The pins of a box.' },
      ...Object.fromEntries(
        PART_FORMULAS.map((name) => [name, { reader: 'formula', help: 'A formula over the calculator.' } as const]),
      ),
    },
  },
  Wire: {
    holds: 'nothing',
    inside: 'Drawing',
    later: true,
    help: 'Runs of wire.',
    attributes: { path: { reader: 'text', required: true, help: 'Corners: 0,2 4,2 4,6.' } },
  },
  Node: {
    holds: 'nothing',
    inside: 'Drawing',
    later: true,
    help: 'Gives a node its name.',
    attributes: {
      name: { reader: 'text', required: true, help: 'The name.' },
      at: { reader: 'text', required: true, help: 'A point of the node.' },
    },
  },
  Label: {
    holds: 'nothing',
    inside: 'Drawing',
    later: true,
    help: 'Words on the drawing.',
    attributes: {
      at: { reader: 'text', required: true, help: 'Where they stand.' },
      text: { reader: 'text', required: true, help: 'The words.' },
    },
  },
} as const satisfies Record<string, ElementRow>;

export type ElementName = keyof typeof TABLE;

/** Every element of the language. The compiler, completion and the language guide read this one table. */
export const ELEMENTS: Readonly<Record<ElementName, ElementRow>> = TABLE;

export function isElementName(name: string): name is ElementName {
  return Object.hasOwn(ELEMENTS, name);
}
