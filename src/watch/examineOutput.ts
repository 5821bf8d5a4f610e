import { accessSync, constants } from 'node:fs';
import { dirname } from 'node:path';
import { joinPath, nameText, pathText } from '../record/bytePath.js';
import { parseLedger } from '../record/ledgerLine.js';
import { isAlive } from '../record/processFacts.js';
import type { RecordContext } from '../record/recordContext.js';
import { readHolder } from '../record/recordLock.js';
import { systemCode } from '../record/recordProblem.js';
import { readLedgerBytes } from '../record/runRecord.js';
import { readSpace } from './diskSpace.js';
import type { Finding } from './examine.js';
import { requireApart } from './openWatch.js';
import { recordedRuns } from './recordedRuns.js';

/** Looks at the output folder without writing to it: permissions, kind of disk, space, holder, every ledger. */
export async function examineOutput(context: RecordContext, folder: string, share: string | undefined): Promise<Finding[]> {
  const findings = [...permissions(folder), ...(await space(context, folder))];
  if (share !== undefined) {
    const apart = await requireApart(context.port, share, folder);
    if (!apart.ok && apart.problem.code === 'output-nested')
      findings.push({ name: 'output', state: 'fail', message: apart.problem.message, fix: apart.problem.hint ?? '' });
  }
  if (isThere(folder)) findings.push(...(await holder(context, folder)), ...(await ledgers(context, folder)));
  return findings;
}

function permissions(folder: string): Finding[] {
  const place = nearest(folder);
  const isMissing = place !== folder;
  try {
    accessSync(place, constants.R_OK | constants.W_OK | constants.X_OK);
    const message = isMissing ? `${folder} will be made in ${place}, which is writable` : `${folder} is readable and writable`;
    return [{ name: 'output', state: 'pass', message }];
  } catch (cause) {
    const who = typeof process.getuid === 'function' ? ` for user id ${process.getuid()}` : '';
    const message = `${place} is not writable${who} (${systemCode(cause) ?? 'unknown'})`;
    return [{ name: 'output', state: 'fail', message, fix: 'Change its owner or permissions, or choose another folder.' }];
  }
}

async function space({ port }: RecordContext, folder: string): Promise<Finding[]> {
  const found = await readSpace(port, nearest(folder));
  if (!found.ok) return [];
  const { stop, warnings, freeBytes, network } = found.value;
  const fix = 'Free some space, or choose another folder.';
  if (stop !== undefined) return [{ name: 'space', state: 'fail', message: stop.message, fix }];
  const findings: Finding[] = warnings.map((message) => ({
    name: network !== undefined && message.includes(network) ? 'disk' : 'space',
    state: 'warn',
    message,
    fix:
      network !== undefined && message.includes(network) ? 'Put the output folder on a local disk and copy it afterwards.' : fix,
  }));
  const megabytes = Number.isFinite(freeBytes)
    ? `${Math.floor(freeBytes / 1024 / 1024)} MB are free`
    : 'the system does not tell how much is free';
  return findings.length > 0 ? findings : [{ name: 'space', state: 'pass', message: `${megabytes}, on a local disk` }];
}

async function holder({ port }: RecordContext, folder: string): Promise<Finding[]> {
  const found = await readHolder(port, folder).catch(() => undefined);
  if (found === undefined) return [{ name: 'holder', state: 'pass', message: 'no watcher holds the output folder' }];
  if (found === 'unreadable')
    return [
      { name: 'holder', state: 'warn', message: 'its lock file cannot be read', fix: 'When no watcher runs, remove .held-by.' },
    ];
  const who = `process ${found.pid} of ${found.user} on ${found.host} since ${found.since}`;
  if (isAlive(found))
    return [
      {
        name: 'holder',
        state: 'warn',
        message: `held by ${who}`,
        fix: 'Two watchers cannot write to one folder: stop it first.',
      },
    ];
  return [{ name: 'holder', state: 'pass', message: `${who} has ended; its lock will be taken over` }];
}

async function ledgers({ port }: RecordContext, folder: string): Promise<Finding[]> {
  const findings: Finding[] = [];
  let sound = 0;
  for (const names of await recordedRuns(port, folder)) {
    const run = joinPath(folder, ...names);
    const bytes = await readLedgerBytes(port, run);
    const parsed = bytes !== undefined ? parseLedger(bytes, pathText(run)) : undefined;
    if (parsed?.ok === true) sound += 1;
    else if (parsed !== undefined)
      findings.push({
        name: 'ledger',
        state: 'fail',
        message: `${names.map(nameText).join('/')}: ${parsed.problem.message}`,
        fix: parsed.problem.hint ?? '',
      });
  }
  if (sound > 0)
    findings.unshift({
      name: 'ledger',
      state: 'pass',
      message: `${sound} ledgers have an unbroken chain; kinetrail verify looks deeper`,
    });
  return findings;
}

function isThere(path: string): boolean {
  return nearest(path) === path;
}

function nearest(folder: string): string {
  for (let path = folder; ; path = dirname(path)) {
    try {
      accessSync(path, constants.F_OK);
      return path;
    } catch {
      if (dirname(path) === path) return path;
    }
  }
}
