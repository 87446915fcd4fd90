/** Rules for expression nodes. Grammars share most names; where one name has two shapes, the rule reads both. */
import type { Code } from '../syntax.ts';
import { child, childrenOf, type Lowering, namedChildren, opaque, place, type Rule } from './rules.ts';
import type { Raw } from './raw.ts';

/** The grammars of C and C++ take a sign into the literal. */
const literal: Rule = (raw, at) => {
  const written = at.textOf(raw);
  const sign = /^[-+]\s*/.exec(written);
  if (!sign) return { kind: 'literal', text: written, ...place(raw) };
  const operand: Code = { kind: 'literal', text: written.slice(sign[0].length), start: raw.start + sign[0].length, end: raw.end };
  return { kind: 'unary', operator: written.slice(0, 1), operand, ...place(raw) };
};
const name: Rule = (raw, at) => ({ kind: 'name', text: at.textOf(raw), ...place(raw) });

/** The only expression inside brackets; several (a comma expression) stay opaque. */
const group: Rule = (raw, at) => {
  const inner = namedChildren(raw);
  const [only] = inner;
  return only && inner.length === 1 ? { kind: 'group', inner: at.lower(only), ...place(raw) } : opaque(raw, at);
};

/** A node that stands for its only child (`argument`, `literal_element`, `expression_list` of one). */
const transparent: Rule = (raw, at) => {
  const inner = namedChildren(raw);
  const [only] = inner;
  return only && inner.length === 1 ? at.lower(only) : { kind: 'list', items: inner.map(at.lower), ...place(raw) };
};

const operatorOf = (raw: Raw): Raw | undefined => child(raw, 'operator') ?? raw.children.find((c) => !c.named);

const binary: Rule = (raw, at) => {
  const parts = namedChildren(raw);
  const left = child(raw, 'left') ?? parts[0];
  const right = child(raw, 'right') ?? parts[parts.length - 1];
  const operator = operatorOf(raw);
  if (!left || !right || !operator || left === right) return opaque(raw, at);
  return { kind: 'binary', operator: at.textOf(operator), operatorStart: operator.start, left: at.lower(left), right: at.lower(right), ...place(raw) };
};

/** `a < b <= c` in Python is (a < b) and (b <= c). */
const comparison: Rule = (raw, at) => {
  const sides = raw.children.filter((c) => c.named && c.field !== 'operators').map(at.lower);
  const operators = childrenOf(raw, 'operators');
  let whole: Code | null = null;
  operators.forEach((operator, i) => {
    const [left, right] = [sides[i], sides[i + 1]];
    if (!left || !right) return;
    const one: Code = { kind: 'binary', operator: at.textOf(operator), operatorStart: operator.start, left, right, start: left.start, end: right.end };
    whole = whole ? { kind: 'binary', operator: 'and', operatorStart: operator.start, left: whole, right: one, ...place(raw) } : one;
  });
  return whole ?? opaque(raw, at);
};

const unary: Rule = (raw, at) => {
  const operand = child(raw, 'argument') ?? child(raw, 'operand') ?? namedChildren(raw)[0];
  const operator = operatorOf(raw);
  if (operator && /^(?:\+\+|--)$/.test(at.textOf(operator))) return update(raw, at);
  return operand && operator && operator.start < operand.start ? { kind: 'unary', operator: at.textOf(operator), operand: at.lower(operand), ...place(raw) } : opaque(raw, at);
};

const not: Rule = (raw, at) => {
  const operand = child(raw, 'argument') ?? namedChildren(raw)[0];
  return operand ? { kind: 'unary', operator: 'not', operand: at.lower(operand), ...place(raw) } : opaque(raw, at);
};

/** Type arguments of a call (`std::exp<double>`) say nothing about what is computed. */
const templated: Rule = (raw, at) => {
  const callee = child(raw, 'name') ?? child(raw, 'function') ?? namedChildren(raw)[0];
  if (!callee) return opaque(raw, at);
  const type = child(raw, 'arguments') ?? child(raw, 'type_arguments');
  if (type && /^(?:static_cast|const_cast|reinterpret_cast|dynamic_cast)$/.test(at.textOf(callee))) {
    return { kind: 'name', text: `${at.textOf(callee)}${at.textOf(type).replace(/\s+/g, '')}`, ...place(raw) };
  }
  const lowered = at.lower(callee);
  return { ...lowered, end: raw.end };
};

const qualified: Rule = (raw, at) => {
  const outer = child(raw, 'scope') ?? child(raw, 'path') ?? child(raw, 'qualifier');
  const inner = child(raw, 'name') ?? namedChildren(raw).at(-1);
  if (!inner) return opaque(raw, at);
  if (!outer || outer === inner) return at.lower(inner);
  const last = at.lower(inner);
  const separator = raw.children.find((c) => !c.named);
  return attach(at.lower(outer), last, separator ? at.textOf(separator) : '.', raw);
};

/** Hangs the path `inner` (a name or a member chain) below `outer`. */
function attach(outer: Code, inner: Code, separator: string, raw: Raw): Code {
  if (inner.kind === 'name') return { kind: 'member', object: outer, name: inner.text, separator, ...place(raw) };
  if (inner.kind === 'member') return { kind: 'member', object: attach(outer, inner.object, separator, raw), name: inner.name, separator: inner.separator, ...place(raw) };
  return { kind: 'opaque', what: 'qualified name', parts: [inner], ...place(raw) };
}

const member: Rule = (raw, at) => {
  const inside = namedChildren(raw);
  const object = child(raw, 'object') ?? child(raw, 'argument') ?? child(raw, 'value') ?? child(raw, 'operand') ?? child(raw, 'expression');
  const property = child(raw, 'property') ?? child(raw, 'field') ?? child(raw, 'attribute') ?? child(raw, 'name') ?? inside.at(-1);
  if (!property) return opaque(raw, at);
  const dots = raw.children.find((c) => !c.named || c.type === 'optional_chain');
  const separator = dots ? at.textOf(dots) : '.';
  if (object && object !== property) return { kind: 'member', object: at.lower(object), name: at.textOf(property).replace(/<.*$/s, ''), separator, ...place(raw) };
  // `this.m` in C# has no node for `this`.
  return { kind: 'name', text: at.textOf(raw).replace(/\s+/g, ''), ...place(raw) };
};

function argumentsOf(raw: Raw | undefined, at: Lowering): readonly Code[] {
  return raw ? namedChildren(raw).map(at.lower) : [];
}

const call: Rule = (raw, at) => {
  const callee = child(raw, 'function') ?? child(raw, 'constructor') ?? namedChildren(raw)[0];
  if (!callee) return opaque(raw, at);
  const args = argumentsOf(child(raw, 'arguments'), at);
  const lowered = at.lower(callee);
  const cast = lowered.kind === 'name' ? /^\w+_cast<(.*)>$/.exec(lowered.text) : null;
  const [only] = args;
  if (cast && only && args.length === 1) return { kind: 'cast', type: cast[1] ?? '', operand: only, ...place(raw) };
  return { kind: 'call', callee: lowered, args, ...place(raw) };
};

/** Java: `object.name(args)` in one node. */
const invocation: Rule = (raw, at) => {
  const object = child(raw, 'object');
  const callee = child(raw, 'name');
  if (!callee) return opaque(raw, at);
  const head: Code = object
    ? { kind: 'member', object: at.lower(object), name: at.textOf(callee), separator: '.', start: object.start, end: callee.end }
    : { kind: 'name', text: at.textOf(callee), ...place(callee) };
  return { kind: 'call', callee: head, args: argumentsOf(child(raw, 'arguments'), at), ...place(raw) };
};

const conditional: Rule = (raw, at) => {
  const parts = namedChildren(raw);
  const condition = child(raw, 'condition');
  const [then, otherwise] = [child(raw, 'consequence'), child(raw, 'alternative')];
  if (condition && then && otherwise) return { kind: 'conditional', condition: at.lower(condition), then: at.lower(then), otherwise: at.lower(otherwise), ...place(raw) };
  const [a, b, c] = parts;
  // Python: value if condition else value.
  return a && b && c && !condition ? { kind: 'conditional', condition: at.lower(b), then: at.lower(a), otherwise: at.lower(c), ...place(raw) } : opaque(raw, at);
};

const cast: Rule = (raw, at) => {
  const value = child(raw, 'value') ?? namedChildren(raw).find((c) => c.field !== 'type' && !/type/.test(c.type));
  const type = child(raw, 'type') ?? namedChildren(raw).find((c) => c !== value);
  return value && type ? { kind: 'cast', type: at.textOf(type).replace(/^<|>$/g, ''), operand: at.lower(value), ...place(raw) } : opaque(raw, at);
};

const index: Rule = (raw, at) => {
  const [object, ...rest] = namedChildren(raw);
  if (!object) return opaque(raw, at);
  return { kind: 'index', object: at.lower(object), args: rest.flatMap((r) => (/list/.test(r.type) && r.type !== 'list' ? argumentsOf(r, at) : [at.lower(r)])), ...place(raw) };
};

const list: Rule = (raw, at) => ({ kind: 'list', items: namedChildren(raw).map(at.lower), ...place(raw) });

/** `T{1}`, `[]float64{1, 2}`, `new double[] {1.0}`: the initializer is what counts; of a scalar type with one item it is a cast. */
const constructed: Rule = (raw, at) => {
  const body = child(raw, 'value') ?? child(raw, 'body') ?? namedChildren(raw).find((c) => /initializer|literal_value/.test(c.type));
  const type = child(raw, 'type');
  if (!body) return opaque(raw, at);
  const items = namedChildren(body).map(at.lower);
  const [only] = items;
  if (type && only && items.length === 1 && /^[\w:]+$/.test(at.textOf(type))) return { kind: 'cast', type: at.textOf(type), operand: only, ...place(raw) };
  return { kind: 'list', items, ...place(raw) };
};

const keyword: Rule = (raw, at) => {
  const value = child(raw, 'value');
  const key = child(raw, 'name');
  return value && key ? { kind: 'named', name: at.textOf(key), value: at.lower(value), ...place(raw) } : opaque(raw, at);
};

const argument: Rule = (raw, at) => {
  const key = child(raw, 'name');
  const value = namedChildren(raw).find((c) => c !== key);
  return key && value ? { kind: 'named', name: at.textOf(key), value: at.lower(value), ...place(raw) } : transparent(raw, at);
};

const inner: Rule = (raw, at) => {
  const [first] = namedChildren(raw);
  return first ? at.lower(first) : opaque(raw, at);
};

/** `x++` gives its variable another value. */
const update: Rule = (raw, at) => {
  const target = child(raw, 'argument') ?? namedChildren(raw)[0];
  return target ? { kind: 'assign', target: at.lower(target), operator: '++', value: { kind: 'opaque', what: 'changed value', parts: [], ...place(raw) }, type: '', ...place(raw) } : opaque(raw, at);
};

const text: Rule = (raw) => ({ kind: 'opaque', what: 'text', parts: [], ...place(raw) });

/** `-1` alone is a unary; C# names its operators without a field. */
export const EXPRESSIONS: Readonly<Record<string, Rule>> = {
  number_literal: literal,
  number: literal,
  integer: literal,
  float: literal,
  float_literal: literal,
  integer_literal: literal,
  int_literal: literal,
  imaginary_literal: literal,
  real_literal: literal,
  decimal_integer_literal: literal,
  decimal_floating_point_literal: literal,
  hex_integer_literal: literal,
  hex_floating_point_literal: literal,
  octal_integer_literal: literal,
  binary_integer_literal: literal,
  user_defined_literal: (raw, at) => {
    const [value] = namedChildren(raw);
    return value?.type === 'number_literal' ? { kind: 'literal', text: at.textOf(raw), ...place(raw) } : opaque(raw, at);
  },
  identifier: name,
  field_identifier: name,
  type_identifier: name,
  namespace_identifier: name,
  package_identifier: name,
  property_identifier: name,
  primitive_type: name,
  predefined_type: name,
  this: name,
  self: name,
  super: name,
  implicit_parameter: name,
  parenthesized_expression: group,
  argument: argument,
  literal_element: transparent,
  expression_list: transparent,
  condition_clause: inner,
  non_null_expression: inner,
  checked_expression: inner,
  await_expression: opaque,
  reference_expression: inner,
  binary_expression: binary,
  binary_operator: binary,
  boolean_operator: binary,
  comparison_operator: comparison,
  unary_expression: unary,
  unary_operator: unary,
  prefix_unary_expression: unary,
  pointer_expression: (raw, at) => {
    const operand = child(raw, 'argument');
    return operand ? { kind: 'unary', operator: at.textOf(raw).slice(0, 1), operand: at.lower(operand), ...place(raw) } : opaque(raw, at);
  },
  not_operator: not,
  update_expression: update,
  postfix_unary_expression: (raw, at) => (/(?:\+\+|--)$/.test(at.textOf(raw)) ? update(raw, at) : inner(raw, at)),
  inc_statement: update,
  dec_statement: update,
  template_function: templated,
  template_method: templated,
  generic_function: templated,
  generic_name: (raw, at) => {
    const [first] = namedChildren(raw);
    return first ? { ...at.lower(first), end: raw.end } : opaque(raw, at);
  },
  qualified_identifier: qualified,
  scoped_identifier: qualified,
  qualified_name: qualified,
  alias_qualified_name: qualified,
  member_expression: member,
  field_expression: member,
  attribute: member,
  member_access_expression: member,
  selector_expression: member,
  field_access: member,
  call_expression: call,
  call: call,
  invocation_expression: call,
  type_conversion_expression: (raw, at) => {
    const [type, operand] = [child(raw, 'type'), child(raw, 'operand')];
    return type && operand ? { kind: 'cast', type: at.textOf(type), operand: at.lower(operand), ...place(raw) } : opaque(raw, at);
  },
  method_invocation: invocation,
  conditional_expression: conditional,
  ternary_expression: conditional,
  cast_expression: cast,
  as_expression: cast,
  satisfies_expression: cast,
  type_assertion: cast,
  type_cast_expression: cast,
  subscript_expression: index,
  subscript: index,
  index_expression: index,
  array_access: index,
  element_access_expression: index,
  initializer_list: list,
  initializer_expression: list,
  array_initializer: list,
  array_expression: list,
  array: list,
  list,
  tuple: list,
  tuple_expression: list,
  compound_literal_expression: constructed,
  composite_literal: constructed,
  array_creation_expression: constructed,
  implicit_array_creation_expression: constructed,
  keyword_argument: keyword,
  string: text,
  string_literal: text,
  interpreted_string_literal: text,
  raw_string_literal: text,
  char_literal: text,
  character_literal: text,
  verbatim_string_literal: text,
};
