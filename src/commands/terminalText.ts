/**
 * Shows text that came from outside on a terminal: control characters, escapes and direction overrides become visible
 * (`\x1b`, `\u202e`), so that nothing in a title or a name can move the cursor or forge a line.
 *
 * @source Unicode Technical Report 36, bidirectional overrides; ECMA-48 control functions
 */
export function escapeForTerminal(text: string): string {
  return text.replace(/[\u0000-\u001f\u007f-\u009f\u2028\u2029\u200e\u200f\u202a-\u202e\u2066-\u2069\ufeff]/g, (character) => {
    const code = character.charCodeAt(0);
    return code < 0x100 ? `\\x${code.toString(16).padStart(2, '0')}` : `\\u${code.toString(16).padStart(4, '0')}`;
  });
}
