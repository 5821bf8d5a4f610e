import { readFileSync } from 'node:fs';
import { join } from 'node:path';

const folder = join(import.meta.dirname, '..', '..', 'templates');

/**
 * Reads a template shipped with the program, or the site's own of the same name. Templates are plain text (styles, wording with
 * `{{name}}` marks): no code is ever run from them, so one cannot reach the file system or the network.
 *
 * @param siteFolder the folder given by `--templates`
 */
export function loadTemplate(name: 'report.css' | 'index.css', siteFolder?: string): string {
  if (siteFolder !== undefined) {
    try {
      return readFileSync(join(siteFolder, name), 'utf8');
    } catch (cause) {
      if ((cause as NodeJS.ErrnoException).code !== 'ENOENT') throw cause;
    }
  }
  return readFileSync(join(folder, name), 'utf8');
}
