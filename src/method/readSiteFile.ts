import { ok, type Problem, type Result } from '../base/result.js';
import { defined } from './readMethod.js';
import { readYaml } from './readYaml.js';
import { type SiteYaml, siteSchema } from './schema.js';
import type { SiteFile, TellEntry } from './site.js';

/**
 * Reads the site file (contract section 8).
 *
 * @errors those of `readYaml`; tell-without-target when an entry names no webhook, mail or file
 */
export function readSiteFile(text: string, fileName: string): Result<SiteFile, readonly Problem[]> {
  const file = readYaml(text, fileName, siteSchema);
  if (!file.ok) return file;
  const { value, at } = file.value;
  const empty = (value.tell ?? []).flatMap((entry, index) =>
    entry.webhook === undefined && entry.mail === undefined && entry.file === undefined
      ? [at(['tell', index], 'tell-without-target', 'the entry names no webhook, mail or file')]
      : [],
  );
  if (empty.length > 0) return { ok: false, problem: empty };
  return ok({
    runs: value.runs ?? [],
    tell: (value.tell ?? []).map(toTell),
    ...defined({ settleS: value.settle_s, pollS: value.poll_s, workers: value.workers, silentAfterMin: value.silent_after_min }),
  });
}

function toTell(entry: NonNullable<SiteYaml['tell']>[number]): TellEntry {
  const { on, webhook, token_env: tokenEnv, mail, file } = entry;
  const { password_env: passwordEnv, attach_report: attachReport, ...rest } = mail ?? { to: [], server: '' };
  const target = mail ? { mail: defined({ ...rest, passwordEnv, attachReport }) } : {};
  return { on, ...target, ...defined({ webhook, tokenEnv, file }) };
}
