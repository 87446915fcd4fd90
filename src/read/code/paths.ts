/** Names with a path: what `std::numbers::pi`, `np.exp`, `f64::consts::PI` and plain names stand for. */
import type { Expression } from '../../expression/index.ts';
import type { Environment } from './environment.ts';
import type { Code } from './syntax.ts';

/** The segments of a chain of names; null where something else (a call, an index) is inside. */
export function segments(code: Code): readonly string[] | null {
  const parts: string[] = [];
  let here: Code = code;
  while (here.kind === 'member') {
    parts.push(here.name);
    here = here.object;
  }
  if (here.kind !== 'name') return null;
  const head = here.text.split(/::|\./).filter((part, i) => part !== '' || i === 0);
  return [...head, ...parts.reverse()];
}

/** The library name that a path ends in, once module prefixes are off; null where the path is not the library's. */
export function libraryName(path: readonly string[], env: Environment): { readonly name: string; readonly prefix: string } | null {
  const [first, ...rest] = path;
  if (first === undefined) return null;
  const last = path[path.length - 1] ?? '';
  if (path.length === 1) {
    const imported = env.imports.names.get(first);
    return { name: imported?.original ?? first, prefix: imported ? imported.module.replaceAll('::', '.') : '' };
  }
  if (first === '') return { name: last, prefix: '' };
  if (env.isLocal(first) && !env.imports.modules.has(first)) return null;
  const lead = path.slice(0, -1).join('.');
  const module = env.imports.modules.get(first);
  const real = (module === undefined ? lead : [module, ...rest.slice(0, -1)].join('.')).replaceAll('::', '.');
  if (env.language.prefixes.includes(lead) || env.language.modules.includes(real)) return { name: last, prefix: real };
  // `math.exp` where `math` is a submodule of an imported one: torch.special, scipy.special.
  if (env.language.modules.some((m) => real.endsWith(`.${m}`))) return { name: last, prefix: real };
  return null;
}

/** The constant that a path names; null where it names none, or where the document declares the name itself. */
export function namedConstant(path: readonly string[], env: Environment): Expression | null {
  const { constants, bareConstants } = env.language;
  const own = (name: string): Expression | null => (Object.hasOwn(constants, name) ? (constants[name] ?? null) : null);
  const library = libraryName(path, env);
  if (!library) return null;
  const plain = library.name.replace(/<.*>$/s, '');
  const found = own(plain);
  if (!found) return null;
  if (path.length > 1) return found;
  const [name = ''] = path;
  if (env.isLocal(name)) return null;
  if (bareConstants.test(name) || env.imports.names.has(name)) return found;
  const opened = env.imports.open.some((module) => {
    const dotted = module.replaceAll('::', '.');
    return env.language.modules.includes(dotted) || env.language.prefixes.includes(dotted);
  });
  return opened ? found : null;
}
