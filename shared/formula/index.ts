/**
 * Formulas: read from the recipe text, checked for names and dimensions, put in order, linked to closures, explained
 * where they give no number, and written for people.
 * Terms: Expr (read, with holes), CheckedExpr (every node with its type; what a document stores), frame (numbers by slot),
 * Sample (finite, unbounded with a sign, or no value with a reason and a place).
 * Units: SI base units everywhere, levels in dB, temperatures in kelvin, truth as 1 and 0.
 * Opens text and quantity. A reader's page uses link, block, explain and show, which never import the parser.
 */
export { type BlockProgram, linkBlock } from './block.ts';
export { checkFormula, type FormulaScope, typeWords } from './check.ts';
export { sampleAt, unboundedReason, type Values } from './explain.ts';
export { type LinkedFormula, linkScalar } from './link.ts';
export { isName, nearestName, reservedAs } from './names.ts';
export { type Definition, namesRead, orderDefinitions } from './order.ts';
export type { NoValueReason, Sample, UnboundedReason } from './outcome.ts';
export { parseFormula } from './parse.ts';
export { formulaLayout, formulaText, type Layout, type Substitute } from './show.ts';
export type { ArithmeticOperator, CheckedExpr, CompareOperator, Expr, Type } from './syntax.ts';
export { type FormulaToken, formulaTokens } from './tokens.ts';
export { FORMULA_WORDING, type FormulaCode, noValueWords, unboundedWords } from './wording.ts';
