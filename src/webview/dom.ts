/** Elements as expressions. Attributes with `false` or `null` are left out; `on` holds listeners. */
type Attribute = string | number | boolean | null | undefined;
type Listeners = { readonly [K in keyof HTMLElementEventMap]?: (event: HTMLElementEventMap[K]) => void };
export type Child = Node | string | null | false | undefined | readonly Child[];
export interface Options {
  readonly on?: Listeners;
  readonly [attribute: string]: Attribute | Listeners;
}

const SVG = 'http://www.w3.org/2000/svg';

export function h<K extends keyof HTMLElementTagNameMap>(tag: K, options: Options = {}, ...children: Child[]): HTMLElementTagNameMap[K] {
  const element = document.createElement(tag);
  dress(element, options);
  append(element, children);
  return element;
}

export function svg(tag: string, options: Options = {}, ...children: Child[]): SVGElement {
  const element = document.createElementNS(SVG, tag) as SVGElement;
  dress(element, options);
  append(element, children);
  return element;
}

function dress(element: Element, options: Options): void {
  for (const [name, value] of Object.entries(options)) {
    if (name === 'on') {
      for (const [event, listener] of Object.entries((value ?? {}) as Record<string, (event: Event) => void>)) element.addEventListener(event, listener);
    } else if (value === true) element.setAttribute(name, '');
    else if (value !== false && value !== null && value !== undefined) element.setAttribute(name, String(value));
  }
}

function append(parent: Element, children: readonly Child[]): void {
  for (const child of children) {
    if (child === null || child === undefined || child === false) continue;
    if (Array.isArray(child)) append(parent, child as readonly Child[]);
    else parent.append(child as Node | string);
  }
}
