import type { TellEntry } from '../method/site.js';
import { fileTarget } from './fileTarget.js';
import { mailTarget } from './mailTarget.js';
import type { Target } from './message.js';
import { webhookTarget } from './webhookTarget.js';

/**
 * The targets of a site file. Secrets are looked up by the names of their environment variables and stay in memory.
 *
 * @param environment e.g. `process.env`
 */
export function targetsOf(entries: readonly TellEntry[], environment: Readonly<Record<string, string | undefined>>): Target[] {
  const secret = (name: string | undefined) => (name !== undefined ? environment[name] : undefined);
  return entries.flatMap(({ on, webhook, tokenEnv, mail, file }) => [
    ...(webhook !== undefined ? [webhookTarget(webhook, on, secret(tokenEnv))] : []),
    ...(mail !== undefined ? [mailTarget(mail, on, secret(mail.passwordEnv))] : []),
    ...(file !== undefined ? [fileTarget(file, on)] : []),
  ]);
}
