/** Code written for the user goes into the file: helper above its caller, imports at the head, the expression becomes the call. */
import { describe, expect, it } from 'vitest';
import { replacement } from '../../src/worker/desk/proposals/helper.ts';
import { importEdits } from '../../src/worker/desk/proposals/imports.ts';
import type { TextEdit } from '../../src/worker/desk/types.ts';

const apply = (text: string, edits: readonly TextEdit[]): string => [...edits].sort((a, b) => b.start - a.start).reduce((t, e) => t.slice(0, e.start) + e.text + t.slice(e.end), text);
function replaced(text: string, expression: string, language: string, code: string, imports: readonly string[] = []): string {
  const start = text.indexOf(expression);
  return apply(text, replacement({ desk: 'replacement', text, language, place: { start, end: start + expression.length }, code, imports, argument: 'x' }).edits);
}

describe('a helper', () => {
  it('in C stands before the comment of its caller', () =>
    expect(replaced('#include <math.h>\n\n/* Speed. */\nstatic float f(float x)\n{\n    return sinf(x);\n}\n', 'sinf(x)', 'c', '// about\nstatic inline float sin_approximation(float x)\n{\n    return x;\n}\n')).toBe(
      '#include <math.h>\n\n// about\nstatic inline float sin_approximation(float x)\n{\n    return x;\n}\n\n/* Speed. */\nstatic float f(float x)\n{\n    return sin_approximation(x);\n}\n',
    ));
  // PEP 8 wants two blank lines between the definitions of a module.
  it('in Python stands before the decorated function', () =>
    expect(replaced('import numpy as np\n\n\n@cached\ndef f(x):\n    return 2 * np.exp(x)\n', 'np.exp(x)', 'python', '# about\ndef exp_approximation(x):\n    return 1 + x\n')).toBe(
      'import numpy as np\n\n\n# about\ndef exp_approximation(x):\n    return 1 + x\n\n\n@cached\ndef f(x):\n    return 2 * exp_approximation(x)\n',
    ));
  it('in Rust stands before the attributes', () =>
    expect(replaced('#[inline]\npub fn f(x: f64) -> f64 {\n    x.sin()\n}\n', 'x.sin()', 'rust', 'fn sin_approximation(x: f64) -> f64 {\n    x\n}\n')).toBe(
      'fn sin_approximation(x: f64) -> f64 {\n    x\n}\n\n#[inline]\npub fn f(x: f64) -> f64 {\n    sin_approximation(x)\n}\n',
    ));
  it('in Java stands inside the class', () =>
    expect(replaced('class A {\n    public double f(double x) {\n        return Math.sin(x);\n    }\n}\n', 'Math.sin(x)', 'java', 'static double sinApproximation(double x) {\n    return x;\n}\n')).toBe(
      'class A {\n    static double sinApproximation(double x) {\n        return x;\n    }\n\n    public double f(double x) {\n        return sinApproximation(x);\n    }\n}\n',
    ));
  it('takes a name that the file does not use', () =>
    expect(replaced('const approximation = 1;\nconst y = Math.sin(x);\n', 'Math.sin(x)', 'javascript', 'function approximation(x) {\n  return x;\n}\n')).toContain('const y = approximation2(x);'));
});

it('an expression keeps together in a product', () => expect(replaced('y = 2 * sin(x);\n', 'sin(x)', 'c', 'x - x*x*x/6.0')).toBe('y = 2 * (x - x*x*x/6.0);\n'));

describe('imports', () => {
  const head = (text: string, ...imports: string[]): string => apply(text, importEdits(text, imports));
  it('follow the last one', () => expect(head('#include <stdio.h>\n\nint main() {}\n', '#include <math.h>')).toBe('#include <stdio.h>\n#include <math.h>\n\nint main() {}\n'));
  it('are not repeated', () => expect(importEdits('import math\n', ['import math'])).toEqual([]));
  it('stand below the description of a Python file', () => expect(head('"""Words.\n\nMore."""\nx = 1\n', 'import math')).toBe('"""Words.\n\nMore."""\nimport math\nx = 1\n'));
  it('stand below the package of a Java file', () => expect(head('package a.b;\n\nclass A {}\n', 'import java.lang.Math;')).toBe('package a.b;\n\nimport java.lang.Math;\nclass A {}\n'));
});
