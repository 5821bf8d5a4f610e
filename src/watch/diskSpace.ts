import { ok, type Problem, type Result } from '../base/result.js';
import type { FilePort, Path } from '../record/filePort.js';
import { recordProblem, systemCode } from '../record/recordProblem.js';

const warnBelowBytes = 200 * 1024 * 1024;
const stopBelowBytes = 16 * 1024 * 1024;
const warnBelowInodes = 2000;
const stopBelowInodes = 100;

/** Type numbers of file systems that live on another machine. @source statfs(2), linux/magic.h */
const networkTypes: ReadonlyMap<number, string> = new Map([
  [0x6969, 'NFS'],
  [0x517b, 'SMB'],
  [0xff534d42, 'CIFS'],
  [0xfe534d42, 'SMB2'],
  [0x01021997, '9P'],
  [0x65735546, 'FUSE'],
  [0x5346414f, 'AFS'],
]);

export interface SpaceReport {
  /** Too little to go on: the ledger would be at risk. */
  readonly stop?: Problem;
  readonly warnings: readonly string[];
  /** Name of a file system on another machine. */
  readonly network?: string;
  readonly freeBytes: number;
}

/** Looks at the space below an output folder, before it runs out. A system that does not tell is taken at its word. */
export async function readSpace(port: FilePort, folder: Path): Promise<Result<SpaceReport>> {
  try {
    const { freeBytes, freeInodes, inodes, type } = await port.space(folder);
    const network = networkTypes.get(type >>> 0);
    const megabytes = Math.floor(freeBytes / 1024 / 1024);
    // A file system without a fixed number of files says zero.
    const hasInodes = inodes > 0;
    const warnings: string[] = [];
    if (freeBytes < warnBelowBytes) warnings.push(`only ${megabytes} MB are free for the record`);
    if (hasInodes && freeInodes < warnBelowInodes) warnings.push(`only ${freeInodes} more files can be made for the record`);
    if (network !== undefined) warnings.push(`the output folder is on ${network}: a local disk keeps its promises better`);
    const isShort = freeBytes < stopBelowBytes || (hasInodes && freeInodes < stopBelowInodes);
    const hint = 'Free some space; work resumes by itself.';
    const message = `${megabytes} MB and room for ${hasInodes ? freeInodes : 'any number of'} files are left for the record: too little to go on safely`;
    const stop = isShort ? { stop: recordProblem('disk-full', message, { hint, retry: 'later' }) } : {};
    return ok({ ...stop, warnings, ...(network !== undefined ? { network } : {}), freeBytes });
  } catch (cause) {
    if (systemCode(cause) === undefined) throw cause;
    return ok({ warnings: [], freeBytes: Number.POSITIVE_INFINITY });
  }
}
