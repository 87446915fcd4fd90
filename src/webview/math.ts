/** Typeset mathematics under a policy that allows no inline style: styles are set through the object model after rendering. */
import katex from 'katex';
import { h } from './dom.ts';

export function math(latex: string, display = false, label?: string): HTMLElement {
  const holder = h('span', { class: display ? 'math display' : 'math' });
  try {
    katex.render(latex, holder, { displayMode: display, throwOnError: true, output: 'htmlAndMathml', strict: 'ignore', trust: false, maxExpand: 500 });
    for (const element of holder.querySelectorAll<HTMLElement>('[style]')) element.style.cssText = element.getAttribute('style') ?? '';
  } catch {
    holder.replaceChildren(h('code', {}, latex));
  }
  if (label) holder.setAttribute('aria-label', label);
  return holder;
}
