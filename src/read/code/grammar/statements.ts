/** Rules for statements and declarations: only what gives names, constants, functions, branches and returns. */
import type { Code, ParameterCode } from '../syntax.ts';
import { forLoop } from './loops.ts';
import { child, childrenOf, isComment, type Lowering, namedChildren, opaque, place, type Rule } from './rules.ts';
import type { Raw } from './raw.ts';

const block: Rule = (raw, at) => ({ kind: 'block', body: namedChildren(raw).map(at.lower), ...place(raw) });

/** A statement that is its only child. */
const statement: Rule = (raw, at) => {
  const inner = namedChildren(raw);
  const [only] = inner;
  return only && inner.length === 1 ? at.lower(only) : block(raw, at);
};

/** The identifier inside a C declarator (`*p`, `&r`, `c[]`, `f(...)`), and whether it is a function's. */
function declarator(raw: Raw, at: Lowering): { readonly name: string; readonly parameters: Raw | null } {
  let here: Raw | undefined = raw;
  let parameters: Raw | null = null;
  while (here) {
    if (/identifier$/.test(here.type) || here.type === 'operator_name' || here.type === 'destructor_name') return { name: at.textOf(here), parameters };
    if (here.type === 'function_declarator') parameters = child(here, 'parameters') ?? parameters;
    here = child(here, 'declarator') ?? namedChildren(here).at(-1);
  }
  return { name: '', parameters };
}

const typeText = (raw: Raw | undefined, at: Lowering): string => (raw ? at.textOf(raw).replace(/^:\s*/, '').trim() : '');

/** The type of a C declaration with its qualifiers, as they stand before the first declarator. */
function typeBefore(raw: Raw, at: Lowering): string {
  const first = raw.children.find((c) => c.field === 'declarator');
  const words = raw.children.filter((c) => (!first || c.start < first.start) && c.named && !isComment(c.type)).map(at.textOf);
  return words.join(' ');
}

function parametersOf(raw: Raw | null | undefined, at: Lowering): readonly ParameterCode[] {
  if (!raw) return [];
  if (/identifier$/.test(raw.type) || raw.type === 'implicit_parameter') return [{ name: at.textOf(raw), type: '', ...place(raw) }];
  return namedChildren(raw).flatMap((p): readonly ParameterCode[] => {
    const type = typeText(child(p, 'type'), at);
    const declared = child(p, 'declarator');
    if (declared) return [{ name: declarator(declared, at).name, type: typeBefore(p, at), ...place(p) }];
    const names = childrenOf(p, 'name');
    if (names.length > 0) return names.map((n) => ({ name: at.textOf(n), type, ...place(n) }));
    const pattern = child(p, 'pattern') ?? (/identifier$|implicit_parameter|self/.test(p.type) ? p : namedChildren(p)[0]);
    return pattern ? [{ name: at.textOf(pattern), type, ...place(p) }] : [];
  });
}

const functionRule: Rule = (raw, at) => {
  const declared = child(raw, 'declarator');
  const { name, parameters } = declared ? declarator(declared, at) : { name: '', parameters: null };
  const own = child(raw, 'name');
  const body = child(raw, 'body') ?? raw.children.find((c) => c.type === 'arrow_expression_clause');
  return {
    kind: 'function',
    name: own ? at.textOf(own) : name,
    parameters: parametersOf(child(raw, 'parameters') ?? parameters, at),
    returns: declared ? typeBefore(raw, at) : typeText(child(raw, 'return_type') ?? child(raw, 'returns') ?? child(raw, 'result') ?? child(raw, 'type'), at),
    body: body ? at.lower(body) : null,
    ...place(raw),
  };
};

const lambda: Rule = (raw, at) => {
  const inner = child(raw, 'declarator');
  const parameters = child(raw, 'parameters') ?? child(raw, 'parameter') ?? (inner ? child(inner, 'parameters') : undefined);
  const body = child(raw, 'body');
  return body ? { kind: 'lambda', parameters: parametersOf(parameters, at), body: at.lower(body), ...place(raw) } : opaque(raw, at);
};

const several = (raw: Raw, parts: readonly Code[]): Code => {
  const [only] = parts;
  return only && parts.length === 1 ? only : { kind: 'block', body: parts, ...place(raw) };
};

/** `double a = 1, b{2};` */
const cDeclaration: Rule = (raw, at) => {
  const type = typeBefore(raw, at);
  const constant = /\b(?:const|constexpr|constinit)\b/.test(type);
  const declared = childrenOf(raw, 'declarator');
  const value = child(raw, 'default_value');
  if (declared.length === 0) return opaque(raw, at);
  return several(
    raw,
    declared.map((d): Code => {
      const { name, parameters } = declarator(d, at);
      const initial = d.type === 'init_declarator' ? (child(d, 'value') ?? null) : (value ?? null);
      if (parameters && !initial) return { kind: 'function', name, parameters: parametersOf(parameters, at), returns: type, body: null, ...place(raw) };
      let lowered = initial ? at.lower(initial) : null;
      if (lowered?.kind === 'list' && lowered.items.length === 1 && !/\[/.test(at.textOf(d).slice(0, at.textOf(d).indexOf('{')))) lowered = lowered.items[0] ?? lowered;
      return { kind: 'declare', name, type, value: lowered, constant, ...place(declared.length === 1 ? raw : d) };
    }),
  );
};

/** Java, C#, JavaScript: declarations hold variable_declarator nodes with a name. */
const declarators: Rule = (raw, at) => {
  const holder = raw.children.find((c) => c.type === 'variable_declaration') ?? raw;
  const type = typeText(child(holder, 'type'), at);
  const head = at.text.slice(raw.start, child(holder, 'type')?.start ?? namedChildren(holder)[0]?.start ?? raw.start);
  const constant = /\b(?:final|const|readonly)\b/.test(head);
  const found = holder.children.filter((c) => c.type === 'variable_declarator');
  return several(
    raw,
    found.map((d): Code => {
      const name = child(d, 'name');
      const value = child(d, 'value') ?? namedChildren(d).find((c) => c !== name && c.start > (name?.end ?? 0) && c.field !== 'type');
      return { kind: 'declare', name: name ? at.textOf(name) : '', type: type || typeText(child(d, 'type'), at), value: value ? at.lower(value) : null, constant, ...place(found.length === 1 ? raw : d) };
    }),
  );
};

/** One name with a value: Rust's const, static, let; a class field. */
const single =
  (constant: (raw: Raw, at: Lowering) => boolean): Rule =>
  (raw, at) => {
    const name = child(raw, 'pattern') ?? child(raw, 'name') ?? child(raw, 'property');
    const value = child(raw, 'value');
    return name ? { kind: 'declare', name: at.textOf(name), type: typeText(child(raw, 'type'), at), value: value ? at.lower(value) : null, constant: constant(raw, at), ...place(raw) } : opaque(raw, at);
  };
const always = (): boolean => true;

/** Go: `const A, B float64 = 1, 2`. */
const goSpec =
  (constant: boolean): Rule =>
  (raw, at) => {
    const names = childrenOf(raw, 'name').filter((c) => c.named);
    const value = child(raw, 'value');
    const values = value ? namedChildren(value) : [];
    const type = typeText(child(raw, 'type'), at);
    return several(
      raw,
      names.map((n, i): Code => {
        const v = values[i];
        return { kind: 'declare', name: at.textOf(n), type, value: v ? at.lower(v) : null, constant, ...place(names.length === 1 ? raw : n) };
      }),
    );
  };

/** `a, b = 1, 2` becomes one assignment a name where the sides pair up. */
const assignment: Rule = (raw, at) => {
  const [left, right] = [child(raw, 'left'), child(raw, 'right')];
  const operator = child(raw, 'operator') ?? raw.children.find((c) => !c.named && c.start >= (left?.end ?? 0) && c.type !== ':');
  if (!left) return opaque(raw, at);
  const type = typeText(child(raw, 'type'), at);
  if (!right) return type ? { kind: 'declare', name: at.textOf(left), type, value: null, constant: false, ...place(raw) } : opaque(raw, at);
  const sign = operator ? at.textOf(operator) : '=';
  const unpack = (side: Raw): readonly Raw[] => (/^(?:expression_list|pattern_list)$/.test(side.type) ? namedChildren(side) : [side]);
  const [targets, values] = [unpack(left), unpack(right)];
  if (targets.length !== values.length) return opaque(raw, at);
  return several(
    raw,
    targets.map((t, i): Code => {
      const value = values[i];
      return { kind: 'assign', target: at.lower(t), operator: sign, value: value ? at.lower(value) : opaque(t, at), type, ...place(targets.length === 1 ? raw : t) };
    }),
  );
};

const returned: Rule = (raw, at) => {
  const [value] = namedChildren(raw);
  return { kind: 'return', value: value ? at.lower(value) : null, ...place(raw) };
};

const branch: Rule = (raw, at) => {
  const condition = child(raw, 'condition');
  const then = child(raw, 'consequence') ?? child(raw, 'body');
  if (!condition || !then) return opaque(raw, at);
  const others = childrenOf(raw, 'alternative').filter((c) => c.named);
  let otherwise: Code | null = null;
  for (let i = others.length - 1; i >= 0; i -= 1) {
    const other = others[i];
    if (!other) continue;
    if (other.type === 'elif_clause') {
      const [c, b] = [child(other, 'condition'), child(other, 'consequence')];
      if (c && b) otherwise = { kind: 'if', condition: at.lower(c), then: at.lower(b), otherwise, ...place(other) };
    } else {
      const body = child(other, 'body') ?? (other.type === 'else_clause' ? namedChildren(other)[0] : other);
      otherwise = body ? at.lower(body) : null;
    }
  }
  return { kind: 'if', condition: at.lower(condition), then: at.lower(then), otherwise, ...place(raw) };
};

/** A macro's replacement is text to the parser: it is read again by whoever needs the value. */
const macro: Rule = (raw, at) => {
  const [name, value] = [child(raw, 'name'), child(raw, 'value')];
  if (!name) return opaque(raw, at);
  const body: Code | null = value ? { kind: 'opaque', what: 'macro', parts: [], ...place(value) } : null;
  return { kind: 'declare', name: at.textOf(name), type: '#define', value: body, constant: true, ...place(raw) };
};

const macroFunction: Rule = (raw, at) => {
  const [name, parameters] = [child(raw, 'name'), child(raw, 'parameters')];
  return { kind: 'function', name: name ? at.textOf(name) : '', parameters: parametersOf(parameters, at), returns: '#define', body: null, ...place(raw) };
};

const imported =
  (path: (text: string) => { readonly path: string; readonly alias: string | null; readonly names: readonly (readonly [string, string])[] }): Rule =>
  (raw, at) => ({ kind: 'import', ...path(at.textOf(raw)), ...place(raw) });

const pairs = (list: string): readonly (readonly [string, string])[] =>
  list
    .split(',')
    .map((item) => item.trim())
    .filter((item) => item !== '')
    .map((item) => {
      const [from = '', to] = item.split(/\s+as\s+/);
      return [from.trim(), (to ?? from).trim()] as const;
    });

const include = imported((text) => ({ path: /[<"]([^>"]*)[>"]/.exec(text)?.[1] ?? text, alias: null, names: [] }));
/** `using namespace std;`, `using std::exp;`, `using static System.Math;`, `using M = System.Math;` */
const using = imported((text) => {
  const words = text.replace(/^using\s+/, '').replace(/;\s*$/, '').trim();
  const alias = /^(\w+)\s*=\s*(.*)$/s.exec(words);
  if (alias) return { path: alias[2] ?? '', alias: alias[1] ?? null, names: [] };
  const opened = /^(?:namespace|static)\s+(.*)$/s.exec(words);
  if (opened) return { path: opened[1] ?? '', alias: null, names: [['*', '*']] };
  const last = /^(.*)::(\w+)$/s.exec(words);
  return last ? { path: last[1] ?? '', alias: null, names: [[last[2] ?? '', last[2] ?? '']] } : { path: words, alias: null, names: [] };
});
const pythonImport: Rule = (raw, at) => {
  const items = pairs(at.textOf(raw).replace(/^import\s+/, ''));
  return several(
    raw,
    items.map(([path, alias]): Code => ({ kind: 'import', path, alias: alias === path ? null : alias, names: [], ...place(raw) })),
  );
};
const pythonFrom = imported((text) => {
  const match = /^from\s+(\S+)\s+import\s+\(?([^)]*)\)?/s.exec(text);
  return { path: match?.[1] ?? '', alias: null, names: pairs((match?.[2] ?? '').replace(/\\\s*\n/g, ' ')) };
});
const scriptImport = imported((text) => {
  const path = /['"]([^'"]*)['"]\s*;?\s*$/.exec(text)?.[1] ?? '';
  const named = /\{([^}]*)\}/s.exec(text)?.[1] ?? '';
  const star = /\*\s+as\s+(\w+)/.exec(text)?.[1] ?? null;
  return { path, alias: star, names: pairs(named) };
});
const rustUse = imported((text) => {
  const words = text.replace(/^(?:pub\s+)?use\s+/, '').replace(/;\s*$/, '').trim();
  const braces = /^(.*)::\{([^{}]*)\}$/s.exec(words);
  if (braces) return { path: braces[1] ?? '', alias: null, names: pairs(braces[2] ?? '') };
  const last = /^(.*)::(\*|\w+(?:\s+as\s+\w+)?)$/s.exec(words);
  return last ? { path: last[1] ?? '', alias: null, names: pairs(last[2] ?? '') } : { path: words, alias: null, names: [] };
});
const javaImport = imported((text) => {
  const match = /^import\s+(static\s+)?([\w.]+?)\.(\*|\w+)\s*;?\s*$/s.exec(text);
  return { path: match?.[2] ?? text, alias: null, names: [[match?.[3] ?? '', match?.[3] ?? '']] };
});
const goImport = imported((text) => {
  const match = /^(?:import\s+)?(\S+\s+)?"([^"]*)"/.exec(text.trim());
  return { path: match?.[2] ?? '', alias: match?.[1]?.trim() ?? null, names: match?.[1]?.trim() === '.' ? [['*', '*']] : [] };
});

export const STATEMENTS: Readonly<Record<string, Rule>> = {
  translation_unit: block,
  module: block,
  program: block,
  source_file: block,
  compilation_unit: block,
  block,
  statement_block: block,
  compound_statement: block,
  statement_list: block,
  declaration_list: block,
  field_declaration_list: block,
  class_body: block,
  const_declaration: block,
  var_declaration: block,
  var_spec_list: block,
  import_spec_list: block,
  expression_statement: statement,
  export_statement: statement,
  global_statement: statement,
  else_clause: statement,
  arrow_expression_clause: statement,
  template_declaration: (raw, at) => {
    const inner = namedChildren(raw).at(-1);
    return inner ? at.lower(inner) : opaque(raw, at);
  },
  function_definition: functionRule,
  function_declaration: functionRule,
  function_item: functionRule,
  method_declaration: functionRule,
  method_definition: functionRule,
  local_function_statement: functionRule,
  constructor_declaration: functionRule,
  lambda_expression: lambda,
  lambda,
  arrow_function: lambda,
  function_expression: lambda,
  func_literal: lambda,
  closure_expression: lambda,
  declaration: cDeclaration,
  field_declaration: (raw, at) => (raw.children.some((c) => c.type === 'variable_declarator' || c.type === 'variable_declaration') ? declarators(raw, at) : cDeclaration(raw, at)),
  local_variable_declaration: declarators,
  local_declaration_statement: declarators,
  lexical_declaration: declarators,
  variable_declaration: declarators,
  const_item: single(always),
  static_item: single(always),
  let_declaration: single((raw) => !raw.children.some((c) => c.type === 'mutable_specifier')),
  public_field_definition: single((raw, at) => /\breadonly\b/.test(at.textOf(raw))),
  field_definition: single(() => false),
  const_spec: goSpec(true),
  var_spec: goSpec(false),
  short_var_declaration: assignment,
  assignment,
  assignment_expression: assignment,
  assignment_statement: assignment,
  augmented_assignment: assignment,
  augmented_assignment_expression: assignment,
  compound_assignment_expr: assignment,
  return_statement: returned,
  return_expression: returned,
  if_statement: branch,
  if_expression: (raw, at) => {
    const lowered = branch(raw, at);
    return lowered;
  },
  for_statement: forLoop,
  for_range_loop: forLoop,
  enhanced_for_statement: forLoop,
  for_in_statement: forLoop,
  foreach_statement: forLoop,
  for_expression: forLoop,
  preproc_def: macro,
  preproc_function_def: macroFunction,
  preproc_include: include,
  using_declaration: using,
  using_directive: using,
  import_statement: (raw, at) => (/^import\s+[\w.]+(?:\s*,|\s+as\b|\s*$)/.test(at.textOf(raw)) && !/['"]/.test(at.textOf(raw)) ? pythonImport(raw, at) : scriptImport(raw, at)),
  import_from_statement: pythonFrom,
  use_declaration: rustUse,
  import_declaration: (raw, at) => {
    const inner = namedChildren(raw);
    return /"/.test(at.textOf(raw)) ? several(raw, inner.map(at.lower)) : javaImport(raw, at);
  },
  import_spec: goImport,
};
