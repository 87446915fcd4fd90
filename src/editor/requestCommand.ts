/** The command line that asks the same question. */
import type { Question } from '../worker/desk/types.ts';

export function requestCommand(text: string, language: string, asked: Question): string {
  const options: (readonly [string, string | undefined])[] = [
    ['language', language],
    ['variable', asked.variable],
    ['point', asked.point],
    ['side', asked.side],
    ['terms', asked.terms === undefined ? undefined : String(asked.terms)],
    ['order', asked.order],
    ['interval', asked.interval?.join(',')],
    ['tolerance', asked.tolerance],
    ['measure', asked.measure],
  ];
  const repeated = [...(asked.small ?? []).map((s) => ['small', s] as const), ...(asked.assume ?? []).map((s) => ['assume', s] as const)];
  const written = [...options, ...repeated].flatMap(([name, value]) => (value === undefined ? [] : [`--${name}=${quote(value)}`]));
  return ['leading-order expand', quote(text), ...written].join(' ');
}

/** For a POSIX shell. */
const quote = (text: string): string => (/^[\w.,:/+-]+$/.test(text) ? text : `'${text.replaceAll("'", "'\\''")}'`);
