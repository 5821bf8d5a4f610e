/**
 * The one escape for text that goes into HTML or SVG: markup characters become references; characters that XML or a terminal
 * would stumble over (controls, direction overrides, lone surrogates) become visible.
 *
 * @source HTML Living Standard 13.1.2; XML 1.0, 2.2 (characters)
 */
export function escapeMarkup(text: string): string {
  return visible(text).replace(/[&<>"']/g, (character) => `&#${character.charCodeAt(0)};`);
}

/** Controls, direction marks and lone surrogates as `\u202e`; text is clipped at 2,000 characters with a mark. */
export function visible(text: string): string {
  const clipped = text.length > 2000 ? `${text.slice(0, 2000)} ...(clipped)` : text;
  return clipped.replace(
    /[\u0000-\u0008\u000b\u000c\u000e-\u001f\u007f-\u009f\u200e\u200f\u2028\u2029\u202a-\u202e\u2066-\u2069\ufeff\ufffe\uffff]|[\ud800-\udbff](?![\udc00-\udfff])|(?<![\ud800-\udbff])[\udc00-\udfff]/g,
    (character) => `\\u${character.charCodeAt(0).toString(16).padStart(4, '0')}`,
  );
}
