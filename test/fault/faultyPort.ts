import type { FilePort, OpenFile, Path } from '../../src/record/filePort.js';

/** A process that is dead: nothing it tries any more has an effect. */
export class Killed extends Error {
  override readonly name = 'Killed';
}

export type Operation =
  | 'open'
  | 'read'
  | 'write'
  | 'fstat'
  | 'sync'
  | 'dataSync'
  | 'truncate'
  | 'close'
  | 'stat'
  | 'statThrough'
  | 'readFolder'
  | 'makeFolder'
  | 'syncFolder'
  | 'link'
  | 'unlink'
  | 'rename'
  | 'space'
  | 'realPath';

export interface Call {
  readonly number: number;
  readonly operation: Operation;
  readonly path: string;
}

export type Fault =
  /** Fails with the system's code, without effect. */
  | { readonly kind: 'fail'; readonly code: string }
  /** A write that takes some bytes and then fails, or says so by its count. */
  | { readonly kind: 'short'; readonly bytes: number; readonly code?: string }
  /** A write that loses its last bytes and reports success. */
  | { readonly kind: 'lie'; readonly lost: number }
  /** The process dies before or after the call took effect. */
  | { readonly kind: 'kill'; readonly when: 'before' | 'after' }
  /** Never answers. */
  | { readonly kind: 'hang' }
  /** A sync that reports success and does nothing. */
  | { readonly kind: 'skip' }
  /** Runs something just before the call: a change from outside. */
  | { readonly kind: 'meanwhile'; readonly act: () => void };

export interface FaultyPort extends FilePort {
  readonly calls: Call[];
}

/** Wraps a port: `plan` decides for each call, by its number and kind, what goes wrong. */
export function makeFaultyPort(inner: FilePort, plan: (call: Call) => Fault | undefined): FaultyPort {
  const calls: Call[] = [];
  let isDead = false;
  const run = async <T>(
    operation: Operation,
    path: Path,
    effect: () => Promise<T>,
    shorten?: (bytes: number) => Promise<T>,
  ): Promise<T> => {
    if (isDead) throw new Killed('dead');
    const call: Call = { number: calls.length + 1, operation, path: typeof path === 'string' ? path : path.toString('latin1') };
    calls.push(call);
    const fault = plan(call);
    switch (fault?.kind) {
      case undefined:
        return effect();
      case 'fail':
        // A close that fails has closed all the same. (close(2))
        if (operation === 'close') await effect();
        throw Object.assign(new Error(`${fault.code}: injected at call ${call.number}`), { code: fault.code });
      case 'short': {
        if (shorten === undefined) return effect();
        const written = await shorten(fault.bytes);
        if (fault.code === undefined) return written;
        throw Object.assign(new Error(`${fault.code}: injected at call ${call.number}`), { code: fault.code });
      }
      case 'lie':
        if (shorten === undefined) return effect();
        await shorten(-fault.lost);
        return Number.NaN as T;
      case 'kill':
        if (fault.when === 'after') await effect().catch(() => undefined);
        isDead = true;
        throw new Killed(`killed ${fault.when} call ${call.number}`);
      case 'hang':
        return new Promise<never>(() => undefined);
      case 'skip':
        return undefined as T;
      case 'meanwhile':
        fault.act();
        return effect();
    }
  };
  return {
    calls,
    open: async (path, mode) => {
      const file = await run('open', path, () => inner.open(path, mode));
      const wrapped: OpenFile = {
        read: (target, position) => run('read', path, () => file.read(target, position)),
        write: async (bytes) => {
          const shorten = (count: number) =>
            file.write(bytes.subarray(0, count < 0 ? Math.max(0, bytes.byteLength + count) : count));
          const written = await run('write', path, () => file.write(bytes), shorten);
          return Number.isNaN(written) ? bytes.byteLength : written;
        },
        stat: () => run('fstat', path, () => file.stat()),
        sync: () => run('sync', path, () => file.sync()),
        dataSync: () => run('dataSync', path, () => file.dataSync()),
        truncate: (size) => run('truncate', path, () => file.truncate(size)),
        close: () => run('close', path, () => file.close()),
      };
      return wrapped;
    },
    stat: (path) => run('stat', path, () => inner.stat(path)),
    statThrough: (path) => run('statThrough', path, () => inner.statThrough(path)),
    readFolder: (path) => run('readFolder', path, () => inner.readFolder(path)),
    makeFolder: (path) => run('makeFolder', path, () => inner.makeFolder(path)),
    syncFolder: (path) => run('syncFolder', path, () => inner.syncFolder(path)),
    link: (from, to) => run('link', to, () => inner.link(from, to)),
    unlink: (path) => run('unlink', path, () => inner.unlink(path)),
    rename: (from, to) => run('rename', to, () => inner.rename(from, to)),
    space: (path) => run('space', path, () => inner.space(path)),
    realPath: (path) => run('realPath', path, () => inner.realPath(path)),
  };
}

/** One fault at call `n`, or at every call from there on. */
export function faultAt(n: number, fault: Fault, isPersistent = false): (call: Call) => Fault | undefined {
  return ({ number }) => (number === n || (isPersistent && number > n) ? fault : undefined);
}
