import { fail, ok, type Result } from '../base/result.js';

const forbidden: readonly (readonly [RegExp, string])[] = [
  [/<\s*(script|style|iframe|frame|object|embed|link|base|meta|form|portal|applet)\b/i, 'an element that loads, runs or sends'],
  [/<[^>]*[\s"'/]on[a-z]+\s*=/i, 'an event handler'],
  [/\b(src|srcset|action|formaction|ping|poster|background|data)\s*=/i, 'an attribute that loads or sends'],
  [/\b(xlink:)?href\s*=\s*(?!["']?(#|\{\{))/i, 'a link that leaves the page'],
  [/(javascript|vbscript|data)\s*:/i, 'an address that runs'],
  [/url\s*\(|image-set\s*\(|@import|@font-face|expression\s*\(|<\/\s*style/i, 'a style that loads'],
];

/**
 * Accepts a site's template only when the page made from it cannot load, run or send anything. The page's content policy would
 * stop most of it as well; this says so before the night begins.
 *
 * @errors template-unsafe
 */
export function requireSafeTemplate(text: string, file: string): Result<string> {
  for (const [pattern, what] of forbidden) {
    const match = pattern.exec(text);
    if (!match) continue;
    const line = text.slice(0, match.index).split('\n').length;
    return fail({
      code: 'template-unsafe',
      area: 'report',
      message: `the template holds ${what}: ${match[0].slice(0, 60)}`,
      hint: 'A template holds page elements, classes and {{names}} only; start from the one shipped in templates/.',
      where: { file, line },
      retry: 'never',
    });
  }
  return ok(text);
}
