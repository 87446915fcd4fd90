/**
 * The neutral form of source code: what every grammar and the operator-precedence reader are lowered to.
 * It keeps just what reading of mathematics needs. Offsets are UTF-16 code units of the document, `end` exclusive.
 */

interface CodeNode {
  readonly start: number;
  readonly end: number;
}

/** A numeric literal as written. */
export interface LiteralCode extends CodeNode {
  readonly kind: 'literal';
  readonly text: string;
}
export interface NameCode extends CodeNode {
  readonly kind: 'name';
  readonly text: string;
}
/** `a.b`, `a::b`, `a->b`. */
export interface MemberCode extends CodeNode {
  readonly kind: 'member';
  readonly object: Code;
  readonly name: string;
  readonly separator: string;
}
export interface CallCode extends CodeNode {
  readonly kind: 'call';
  readonly callee: Code;
  readonly args: readonly Code[];
}
export interface UnaryCode extends CodeNode {
  readonly kind: 'unary';
  readonly operator: string;
  readonly operand: Code;
}
/** Operators as written; a coefficient beside its factor (Julia's `2x`) has the operator `juxtaposed`. */
export interface BinaryCode extends CodeNode {
  readonly kind: 'binary';
  readonly operator: string;
  readonly operatorStart: number;
  readonly left: Code;
  readonly right: Code;
}
export interface ConditionalCode extends CodeNode {
  readonly kind: 'conditional';
  readonly condition: Code;
  readonly then: Code;
  readonly otherwise: Code;
}
export interface CastCode extends CodeNode {
  readonly kind: 'cast';
  readonly type: string;
  readonly operand: Code;
}
export interface IndexCode extends CodeNode {
  readonly kind: 'index';
  readonly object: Code;
  readonly args: readonly Code[];
}
export interface GroupCode extends CodeNode {
  readonly kind: 'group';
  readonly inner: Code;
}
/** Array, tuple, initializer. */
export interface ListCode extends CodeNode {
  readonly kind: 'list';
  readonly items: readonly Code[];
  /** The index of the first entry where the declaration gives it (Fortran's `c(0:5)`); else it is the language's. */
  readonly first?: bigint;
}
export interface LambdaCode extends CodeNode {
  readonly kind: 'lambda';
  readonly parameters: readonly ParameterCode[];
  readonly body: Code;
}
/** A keyword argument. */
export interface NamedCode extends CodeNode {
  readonly kind: 'named';
  readonly name: string;
  readonly value: Code;
}
/** Anything else; what stands inside may still be read. `what` names it for messages. */
export interface OpaqueCode extends CodeNode {
  readonly kind: 'opaque';
  readonly what: string;
  readonly parts: readonly Code[];
  /** A loop whose head may be followed; its pieces are among the parts. */
  readonly loop?: Loop;
}

/** `for (first; condition; step)`, or names that run over a range or a list. */
export type LoopHead =
  | { readonly kind: 'steps'; readonly first: Code; readonly condition: Code; readonly step: Code | null }
  | { readonly kind: 'each'; readonly names: readonly string[]; readonly over: Code }
  /** Fortran: `do i = first, last, step`. */
  | { readonly kind: 'range'; readonly name: string; readonly first: Code; readonly last: Code; readonly step: Code | null };
export interface Loop {
  readonly head: LoopHead;
  readonly body: Code;
}

export interface BlockCode extends CodeNode {
  readonly kind: 'block';
  readonly body: readonly Code[];
}
export interface ParameterCode extends CodeNode {
  readonly name: string;
  readonly type: string;
}
export interface FunctionCode extends CodeNode {
  readonly kind: 'function';
  readonly name: string;
  readonly parameters: readonly ParameterCode[];
  readonly returns: string;
  /** Null where only the head was read. A body that is one expression is that expression. */
  readonly body: Code | null;
}
export interface DeclareCode extends CodeNode {
  readonly kind: 'declare';
  readonly name: string;
  readonly type: string;
  readonly value: Code | null;
  /** The language lets nobody assign to it again (`const`, `val`, `let` in Rust and Swift, `parameter`, a macro). */
  readonly constant: boolean;
}
export interface AssignCode extends CodeNode {
  readonly kind: 'assign';
  readonly target: Code;
  readonly operator: string;
  readonly value: Code;
  readonly type: string;
}
export interface ReturnCode extends CodeNode {
  readonly kind: 'return';
  readonly value: Code | null;
}
export interface IfCode extends CodeNode {
  readonly kind: 'if';
  readonly condition: Code;
  readonly then: Code;
  readonly otherwise: Code | null;
}
/** `path` is the module, `names` what it brings in as [original, local]; `*` brings in all. `alias` is a local name of the module. */
export interface ImportCode extends CodeNode {
  readonly kind: 'import';
  readonly path: string;
  readonly alias: string | null;
  readonly names: readonly (readonly [string, string])[];
}

export type Code =
  | LiteralCode
  | NameCode
  | MemberCode
  | CallCode
  | UnaryCode
  | BinaryCode
  | ConditionalCode
  | CastCode
  | IndexCode
  | GroupCode
  | ListCode
  | LambdaCode
  | NamedCode
  | OpaqueCode
  | BlockCode
  | FunctionCode
  | DeclareCode
  | AssignCode
  | ReturnCode
  | IfCode
  | ImportCode;

/** A comment with its delimiters. `doc`: the language's tools take it as documentation. */
export interface CommentCode {
  readonly start: number;
  readonly end: number;
  readonly doc: boolean;
}

/** A document in neutral form. */
export interface Program {
  readonly root: Code;
  readonly comments: readonly CommentCode[];
}

/** Direct children in reading order. */
export function partsOf(code: Code): readonly Code[] {
  switch (code.kind) {
    case 'literal':
    case 'name':
    case 'import':
      return [];
    case 'member':
      return [code.object];
    case 'call':
      return [code.callee, ...code.args];
    case 'unary':
    case 'cast':
      return [code.operand];
    case 'binary':
      return [code.left, code.right];
    case 'conditional':
      return [code.condition, code.then, code.otherwise];
    case 'index':
      return [code.object, ...code.args];
    case 'group':
      return [code.inner];
    case 'list':
      return code.items;
    case 'lambda':
      return [code.body];
    case 'named':
      return [code.value];
    case 'opaque':
      return code.parts;
    case 'block':
      return code.body;
    case 'function':
      return code.body ? [code.body] : [];
    case 'declare':
      return code.value ? [code.value] : [];
    case 'assign':
      return [code.target, code.value];
    case 'return':
      return code.value ? [code.value] : [];
    case 'if':
      return code.otherwise ? [code.condition, code.then, code.otherwise] : [code.condition, code.then];
  }
}

/** Every node, parents before children, without recursion. */
export function* walkCode(root: Code): Generator<Code> {
  const stack: Code[] = [root];
  for (let code = stack.pop(); code; code = stack.pop()) {
    yield code;
    const parts = partsOf(code);
    for (let i = parts.length - 1; i >= 0; i -= 1) {
      const part = parts[i];
      if (part) stack.push(part);
    }
  }
}

/** Like walkCode, but functions inside the root are passed over. */
export function* walkWithin(root: Code): Generator<Code> {
  const stack: Code[] = [root];
  for (let code = stack.pop(); code; code = stack.pop()) {
    if (code !== root && (code.kind === 'function' || code.kind === 'lambda')) continue;
    yield code;
    const parts = partsOf(code);
    for (let i = parts.length - 1; i >= 0; i -= 1) {
      const part = parts[i];
      if (part) stack.push(part);
    }
  }
}

/** The node and its ancestors around [start, end), outermost first; the last is the smallest that contains the range. */
export function pathTo(root: Code, start: number, end: number): readonly Code[] {
  const path: Code[] = [];
  let here: Code | undefined = root;
  while (here) {
    path.push(here);
    here = partsOf(here).find((part) => part.start <= start && part.end >= end && part.end > part.start);
  }
  return path;
}
