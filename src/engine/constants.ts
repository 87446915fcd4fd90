/** Constants that code defines beside an expression (`const double g = 9.81;`): symbols as they stand, or their values filled in. */
import { type Assumption, build, dependsOn, type Expression, freeSymbols, rationalOf, substitute } from '../expression/index.ts';
import { type Outcome, success } from '../outcome.ts';
import type { ConstantAnswer, ExpandRequest } from '../protocol.ts';
import { toPlain } from '../write/index.ts';
import type { EngineTools } from './resources.ts';
import { candidatesOf, type SourceFormula, sourceFormula, type SourceRequest } from './source.ts';

type ConstantsRequest = SourceRequest & Pick<ExpandRequest, 'small' | 'constants'>;

interface Value {
  readonly name: string;
  readonly value: Expression;
}

/** The constants that the expression holds, each with its value free of other constants, in order of definition. The quantity asked about is none of them. */
function constantsIn(source: SourceFormula, request: ConstantsRequest): readonly Value[] {
  const known: Value[] = [];
  for (const { name, value } of source.code?.constants ?? []) known.push({ name, value: filledIn(value, known) });
  const used = known.filter(({ name }) => dependsOn(source.expression, name));
  const asked = askedFor(source, request);
  if (asked.length > 0) return used.filter(({ name }) => !asked.includes(name));
  // Something has to stay a symbol: where every symbol has a value, the one that the text shows to vary.
  if (freeSymbols(source.expression).some((name) => !used.some((constant) => constant.name === name))) return used;
  const varying = candidatesOf(source, source.expression).found?.variable.expression;
  return varying ? used.filter(({ name }) => !dependsOn(varying, name)) : [];
}

/** Symbols that the request asks about by name. */
const askedFor = (source: SourceFormula, request: ConstantsRequest): readonly string[] =>
  [request.variable, request.unknown, ...(request.small ?? [])].flatMap((text) => {
    const quantity = text === undefined ? null : source.readSymbol(text);
    return quantity?.ok ? freeSymbols(quantity.value) : [];
  });

/** By common practice these names mean one number in code, where it comes from a header; anything that the text itself says of them goes before. */
const CIRCLE: readonly string[] = ['pi', 'PI'];

/** The circle constant under a name that stands in the code but is declared nowhere in it, beside another symbol to ask about. */
function undeclaredCircle(source: SourceFormula, constants: readonly Value[], request: ConstantsRequest): readonly Value[] {
  const { code, expression } = source;
  if (!code) return [];
  const spoken = [...code.names, ...code.constants.map((c) => c.name), ...askedFor(source, request)];
  const free = freeSymbols(expression).filter((name) => !constants.some((c) => c.name === name));
  const circle = free.filter((name) => CIRCLE.includes(name) && !spoken.includes(name));
  return circle.length < free.length ? circle.map((name) => ({ name, value: build.constant('pi') })) : [];
}

const filledIn = (e: Expression, values: readonly Value[]): Expression => values.reduce((tree, { name, value }) => substitute(tree, name, value), e);

/**
 * The formula of a request, with the constants that code defines beside it kept as symbols or filled in, as the request says;
 * `byDefault` where it says nothing: a polynomial for a program needs numbers, an expansion does not.
 */
export async function sourceOf(request: ConstantsRequest, tools: EngineTools, byDefault: 'symbols' | 'values'): Promise<Outcome<SourceFormula>> {
  const source = await sourceFormula(request, tools);
  if (!source.ok) return source;
  const defined = constantsIn(source.value, request);
  const filled = (request.constants ?? byDefault) === 'values';
  const circle = filled ? undeclaredCircle(source.value, defined, request) : [];
  const found = [...defined, ...circle];
  if (found.length === 0) return source;
  const constants: readonly ConstantAnswer[] = [
    ...defined.map(({ name, value }) => ({ name, value: written(value), filled })),
    ...circle.map(({ name }) => ({ name, value: 'pi', filled, assumed: true as const })),
  ];
  if (!filled) return success({ ...source.value, constants, knownValues: found.flatMap(({ name, value }) => equals(name, value)) });
  return success({ ...source.value, constants, expression: filledIn(source.value.expression, found) });
}

/** As two inequalities: a range of one value. */
const equals = (name: string, value: Expression): readonly Assumption[] => (['>=', '<='] as const).map((relation) => ({ kind: 'relation', left: build.symbol(name), relation, right: value }));

/** A literal as it stands in the code, anything else in plain notation, fractions reduced. */
function written(value: Expression): string {
  if (value.kind === 'number' && value.written !== undefined) return value.written;
  const exact = rationalOf(value);
  return toPlain(exact ? build.number(exact) : value);
}

/** The values filled in, as a result states them: `g = 981/100`. */
export const filledConstants = ({ constants }: SourceFormula): readonly string[] => (constants ?? []).filter((c) => c.filled).map(({ name, value, assumed }) => (assumed ? `${name} is the circle constant 3.14159...: nothing in this text declares the name` : `${name} = ${value}`));

/** Values of constants that stay symbols in the sum but are numbers in what is measured. */
export interface MeasuredConstants {
  readonly values: readonly Assumption[];
  /** What a bound or value rests on then. */
  readonly stated: readonly string[];
}
export const measuredConstants = ({ constants, knownValues }: SourceFormula): MeasuredConstants => ({
  values: knownValues ?? [],
  stated: knownValues ? (constants ?? []).map(({ name, value }) => `${name} = ${value} in the bounds and values`) : [],
});
