import { invariant } from '../base/result.js';
import { escapeMarkup } from './escapeMarkup.js';

/** Markup made by the program itself: the one kind of value that a template does not escape. */
export interface Markup {
  readonly markup: string;
}

export type TemplateValue = string | Markup | boolean | readonly TemplateValues[];
export interface TemplateValues {
  readonly [name: string]: TemplateValue;
}

const tag = /\{\{([#^/]?)\s*([a-zA-Z][a-zA-Z0-9]*)\s*\}\}/g;

/**
 * Fills a page template: `{{name}}` is replaced by an escaped text, `{{#name}}...{{/name}}` repeats for a list or shows for yes,
 * `{{^name}}...{{/name}}` shows for no or an empty list. There is nothing else: a template holds no code, so a site's own
 * template can reach neither files nor the network while a report is made. (A template language that compiles to JavaScript
 * could, whatever it escapes.)
 *
 * @errors invariant: a section that is not closed
 */
export function fillTemplate(template: string, values: TemplateValues): string {
  const parts: string[] = [];
  let at = 0;
  tag.lastIndex = 0;
  for (let match = tag.exec(template); match !== null; match = tag.exec(template)) {
    parts.push(template.slice(at, match.index));
    const [whole, kind, name] = match as unknown as [string, string, string];
    at = match.index + whole.length;
    const value = Object.hasOwn(values, name) ? values[name] : undefined;
    if (kind === '') {
      parts.push(shown(value));
      continue;
    }
    const end = closingOf(template, name, at);
    invariant(end !== undefined && kind !== '/', `the template section "${name}" is not closed`);
    const inner = template.slice(at, end.start);
    parts.push(section(inner, kind, value, values));
    at = end.end;
    tag.lastIndex = at;
  }
  return parts.join('') + template.slice(at);
}

function section(inner: string, kind: string, value: TemplateValue | undefined, values: TemplateValues): string {
  const isShown = Array.isArray(value) ? value.length > 0 : Boolean(value);
  // `fillTemplate` keeps its place in a shared expression: keep that of the caller.
  const place = tag.lastIndex;
  let text = '';
  if (kind === '^') text = isShown ? '' : fillTemplate(inner, values);
  else if (Array.isArray(value)) text = value.map((item: TemplateValues) => fillTemplate(inner, { ...values, ...item })).join('');
  else if (isShown) text = fillTemplate(inner, values);
  tag.lastIndex = place;
  return text;
}

function closingOf(template: string, name: string, from: number): { start: number; end: number } | undefined {
  const own = new RegExp(`\\{\\{([#^/])\\s*${name}\\s*\\}\\}`, 'g');
  own.lastIndex = from;
  let depth = 1;
  for (let match = own.exec(template); match !== null; match = own.exec(template)) {
    depth += match[1] === '/' ? -1 : 1;
    if (depth === 0) return { start: match.index, end: match.index + match[0].length };
  }
  return undefined;
}

function shown(value: TemplateValue | undefined): string {
  if (value === undefined || typeof value === 'boolean' || Array.isArray(value)) return '';
  if (typeof value === 'string') return escapeMarkup(value);
  return (value as Markup).markup;
}
