import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { ok, type Result } from '../base/result.js';
import { requireSafeTemplate } from './requireSafeTemplate.js';

/** The pages and styles that a report is drawn with. The scripts are always the program's own. */
export interface TemplateSet {
  readonly reportPage: string;
  readonly reportStyle: string;
  readonly indexPage: string;
  readonly indexStyle: string;
  readonly script: string;
  readonly indexScript: string;
}

const names = { reportPage: 'report.html', reportStyle: 'report.css', indexPage: 'index.html', indexStyle: 'index.css' } as const;
const sizeBytesMax = 512 * 1024;
const shippedFolder = fileURLToPath(new URL('../../templates/', import.meta.url));
let shipped: TemplateSet | undefined;

/** The templates shipped with the program. */
export function shippedTemplates(): TemplateSet {
  const read = (name: string) => readFileSync(join(shippedFolder, name), 'utf8');
  shipped ??= {
    reportPage: read(names.reportPage),
    reportStyle: read(names.reportStyle),
    indexPage: read(names.indexPage),
    indexStyle: read(names.indexStyle),
    script: read('report.js'),
    indexScript: read('index.js'),
  };
  return shipped;
}

/**
 * The shipped templates with those of a site's folder in their place.
 *
 * @param folder holds any of report.html, report.css, index.html, index.css
 * @errors template-unsafe, template-too-large
 */
export function readTemplates(folder: string): Result<TemplateSet> {
  const set: Record<string, string> = { ...shippedTemplates() };
  for (const [key, name] of Object.entries(names)) {
    const file = join(folder, name);
    let text: string;
    try {
      text = readFileSync(file, 'utf8');
    } catch (cause) {
      if ((cause as NodeJS.ErrnoException).code === 'ENOENT') continue;
      throw cause;
    }
    if (Buffer.byteLength(text) > sizeBytesMax) {
      const message = `the template holds more than ${sizeBytesMax} bytes`;
      return { ok: false, problem: { code: 'template-too-large', area: 'report', message, where: { file }, retry: 'never' } };
    }
    const safe = requireSafeTemplate(text, file);
    if (!safe.ok) return safe;
    set[key] = text;
  }
  return ok(set as unknown as TemplateSet);
}
