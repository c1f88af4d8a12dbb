import type { LimitModel, ResultModel } from '#calculator';
import { type CheckedExpr, type FormulaCode, typeWords } from '#formula';
import {
  coherentUnit,
  type Dimension,
  dimensionWords,
  KINDS,
  kindOfDimension,
  type QuantityCode,
  readUnit,
  sameDimension,
  unitsSpeltLike,
} from '#quantity';
import { problem } from '#text';
import { type Attributes, readEntry, readWhole } from './attributes.ts';
import type { ElementBlock } from './blocks.ts';
import { readReading, textsOf } from './build-given.ts';
import { kindOf, type Names } from './names.ts';
import type { AttributeText } from './scan-tags.ts';

const MOST_DIGITS = 12;

/** Reads a Result whose formula is checked. Null where it has nothing to show: its formula is faulty. */
export function buildResult(
  block: ElementBlock,
  attributes: Attributes,
  formula: CheckedExpr | null,
  names: Names,
): ResultModel | null {
  const { problems } = names;
  const name = attributes.get('name')?.text;
  const measure = attributes.get('measure');
  const typed = attributes.get('formula');
  if (measure === undefined && typed === undefined && name !== undefined) {
    problems.error('result-without-formula', block.nameSpan, { name });
  }
  const digits = attributes.get('digits');
  const shown = digits === undefined ? null : readWhole(digits, 1, MOST_DIGITS, problems);
  const frequency = attributes.get('frequency');
  if (frequency !== undefined) names.read(frequency.value);
  const agree = attributes.get('agree');
  const agreed = agree === undefined ? null : readAgree(agree, names);
  const shape = shapeOf(attributes, formula, names);
  if (name === undefined || (typed !== undefined && shape === null)) return null;
  if (typed === undefined && measure === undefined) return null;
  return {
    name,
    label: attributes.get('label')?.text ?? name,
    ...(formula === null ? {} : { formula }),
    ...(measure === undefined
      ? {}
      : { measure: { text: measure.text, drawing: attributes.get('drawing')?.text ?? '' } }),
    ...(shape ?? { quantity: null, dimensionUnit: '' }),
    ...(shown === null ? {} : { digits: shown }),
    ...(agreed === null ? {} : { agree: agreed }),
    ...textsOf(attributes, ['means', 'note']),
    span: block.span,
  };
}

function readAgree(attribute: AttributeText, { source, problems }: Names): number | null {
  const read = readEntry(source, attribute.value, { kind: 'ratio', mayBeRange: false }, problems);
  return read?.low ?? null;
}

type Shape = Pick<ResultModel, 'quantity' | 'dimensionUnit' | 'unit' | 'reading'>;

/** How the number is written: its quantity, unit and reading. Null for a formula that gives no number. */
function shapeOf(attributes: Attributes, formula: CheckedExpr | null, names: Names): Shape | null {
  if (formula === null) return null;
  if (formula.type === 'truth') {
    names.problems.add([problem<FormulaCode>('truth-for-number', formula.span)]);
    return null;
  }
  const asked = attributes.get('unit');
  const named = kindOf(formula, names);
  const isVoltage = sameDimension(formula.type, KINDS.voltage.dimension);
  const isLevelOfVoltage = isVoltage && attributes.get('reading')?.text === 'rms' && /^dB[uV]$/.test(asked?.text ?? '');
  const unit = asked === undefined || isLevelOfVoltage ? asked?.text : unitOf(asked, formula.type, names);
  const quantity = unit === undefined ? named : (kindOfDimension(formula.type, unit) ?? named);
  const reading = readReading(attributes.get('reading'), quantity, names);
  return {
    quantity,
    dimensionUnit: coherentUnit(formula.type),
    ...(unit === undefined ? {} : { unit }),
    ...(reading === undefined ? {} : { reading }),
  };
}

function unitOf(asked: AttributeText, type: Dimension, { problems }: Names): string | undefined {
  const unit = readUnit(asked.text.trim());
  const expected = coherentUnit(type);
  if (unit === null) {
    const facts = { unit: asked.text, near: unitsSpeltLike(asked.text.trim()), expected };
    problems.add([problem<QuantityCode>('unit-unknown', asked.value, facts)]);
    return undefined;
  }
  if (sameDimension(unit.dimension, type)) return unit.unit;
  const facts = {
    unit: asked.text,
    measures: dimensionWords(unit.dimension),
    quantity: dimensionWords(type),
    expected,
  };
  problems.add([problem<QuantityCode>('unit-wrong', asked.value, facts)]);
  return undefined;
}

/** Reads a Limit; null where what it judges, or a bound, is faulty. */
export function buildLimit(block: ElementBlock, attributes: Attributes, names: Names): LimitModel | null {
  const { problems } = names;
  const name = attributes.get('name')?.text;
  const of = attributes.get('of');
  if (!attributes.has('from') && !attributes.has('to')) problems.error('limit-without-bound', block.nameSpan);
  const judged = of === undefined ? null : names.read(of.value);
  const bound = (key: 'from' | 'to' | 'near') => {
    const attribute = attributes.get(key);
    const checked = attribute === undefined ? null : names.read(attribute.value);
    if (attribute === undefined || checked === null || judged === null) return checked;
    const isSame = checked.type !== 'truth' && judged.type !== 'truth' && sameDimension(checked.type, judged.type);
    if (isSame || judged.type === 'truth') return checked;
    const facts = { what: key, found: typeWords(checked.type), of: typeWords(judged.type) };
    problems.error('limit-dimension', attribute.value, facts);
    return null;
  };
  const from = bound('from');
  const to = bound('to');
  const near = bound('near');
  if (judged?.type === 'truth') problems.add([problem<FormulaCode>('truth-for-number', judged.span)]);
  if (name === undefined || judged === null || judged.type === 'truth' || (from === null && to === null)) return null;
  return {
    name,
    of: judged,
    ...(from === null ? {} : { from }),
    ...(to === null ? {} : { to }),
    ...(near === null ? {} : { near }),
    says: attributes.get('says')?.text ?? '',
    level: attributes.get('level')?.text === 'caution' ? 'caution' : 'stop',
    over: attributes.get('over')?.text === 'nominal' ? 'nominal' : 'everything',
    quantity: kindOf(judged, names),
    dimensionUnit: coherentUnit(judged.type),
    span: block.span,
  };
}
