import type { FileKind, FilePort, FileStat, FolderSpace, OpenFile, Path } from '../../src/record/filePort.js';

/**
 * A disk in memory that knows what was synced: bytes of a file by `sync` or `dataSync`, names of a folder by `syncFolder`. A
 * power cut keeps exactly that. It serves the record and the watcher through the same interface as the real one.
 */

interface Inode {
  readonly number: bigint;
  kind: FileKind;
  bytes: Buffer;
  durableBytes: Buffer;
  /** Whether the file itself was ever synced: else a power cut leaves it empty. */
  modifiedNs: bigint;
  names?: Map<string, Inode>;
  durableNames?: Map<string, Inode>;
  target?: string;
}

export interface SimulatedDisk {
  readonly port: FilePort;
  /** What a power cut would leave: a new disk. */
  afterPowerCut(): SimulatedDisk;
  /** Every regular file by its path, as bytes; for comparing. */
  files(under?: string): Map<string, Buffer>;
  write(path: Path, bytes: Uint8Array | string, modifiedMs?: number): void;
  makeFolders(path: Path): void;
  putLink(path: string, target: string): void;
  putOther(path: string): void;
  remove(path: string): void;
  move(from: string, to: string): void;
  setSpace(space: Partial<FolderSpace>): void;
  readonly openCount: () => number;
}

function failure(code: string, path: string): Error {
  return Object.assign(new Error(`${code}: ${path}`), { code });
}

const keyOf = (path: Path): string => (typeof path === 'string' ? Buffer.from(path).toString('latin1') : path.toString('latin1'));
const partsOf = (path: Path): string[] =>
  keyOf(path)
    .split('/')
    .filter((part) => part !== '' && part !== '.');

export function makeDisk(
  nowMs: () => number = () => 1_800_000_000_000,
  root?: Inode,
  space: FolderSpace = { freeBytes: 1e12, freeInodes: 1e9, inodes: 2e9, type: 0xef53 },
): SimulatedDisk {
  let nextNumber = 2n;
  let opened = 0;
  let currentSpace = space;
  const makeInode = (kind: FileKind): Inode => ({
    number: nextNumber++,
    kind,
    bytes: Buffer.alloc(0),
    durableBytes: Buffer.alloc(0),
    modifiedNs: BigInt(Math.round(nowMs())) * 1_000_000n,
    ...(kind === 'folder' ? { names: new Map(), durableNames: new Map() } : {}),
  });
  const top = root ?? makeInode('folder');
  if (root) nextNumber = largest(root) + 1n;

  const folderAt = (parts: readonly string[], path: Path): Inode => {
    let node = top;
    for (const part of parts) {
      const next = node.names?.get(part);
      if (next === undefined) throw failure('ENOENT', keyOf(path));
      if (next.kind !== 'folder') throw failure('ENOTDIR', keyOf(path));
      node = next;
    }
    return node;
  };
  const place = (path: Path) => {
    const parts = partsOf(path);
    return { folder: folderAt(parts.slice(0, -1), path), name: parts.at(-1)! };
  };
  const find = (path: Path): Inode => {
    if (partsOf(path).length === 0) return top;
    const { folder, name } = place(path);
    const node = folder.names!.get(name);
    if (node === undefined) throw failure('ENOENT', keyOf(path));
    return node;
  };
  const findOrNothing = (path: Path): Inode | undefined => {
    try {
      return find(path);
    } catch {
      return undefined;
    }
  };
  const follow = (path: Path, depth = 0): Inode => {
    const node = find(path);
    if (node.kind !== 'link') return node;
    if (depth > 8) throw failure('ELOOP', keyOf(path));
    return follow(Buffer.from(node.target!, 'latin1'), depth + 1);
  };
  const statOf = (node: Inode): FileStat => ({
    kind: node.kind,
    sizeBytes: node.bytes.length,
    modifiedNs: node.modifiedNs,
    inode: node.number,
    device: 1n,
  });
  const touch = (node: Inode) => {
    node.modifiedNs = BigInt(Math.round(nowMs())) * 1_000_000n;
  };
  const openInode = (node: Inode): OpenFile => {
    let isOpen = true;
    opened += 1;
    const use = () => {
      if (!isOpen) throw failure('EBADF', 'closed');
    };
    return {
      read: async (target, position) => {
        use();
        return node.bytes.copy(target, 0, position, position + target.byteLength);
      },
      write: async (bytes) => {
        use();
        node.bytes = Buffer.concat([node.bytes, bytes]);
        touch(node);
        return bytes.byteLength;
      },
      stat: async () => {
        use();
        return statOf(node);
      },
      sync: async () => {
        use();
        node.durableBytes = node.bytes;
      },
      dataSync: async () => {
        use();
        node.durableBytes = node.bytes;
      },
      truncate: async (sizeBytes) => {
        use();
        node.bytes = node.bytes.subarray(0, sizeBytes);
        touch(node);
      },
      close: async () => {
        use();
        isOpen = false;
        opened -= 1;
      },
    };
  };

  const port: FilePort = {
    open: async (path, mode) => {
      if (mode === 'create') {
        const { folder, name } = place(path);
        if (folder.names!.has(name)) throw failure('EEXIST', keyOf(path));
        const node = makeInode('file');
        folder.names!.set(name, node);
        return openInode(node);
      }
      const node = find(path);
      if (node.kind === 'link') throw failure('ELOOP', keyOf(path));
      if (node.kind === 'folder' && mode === 'append') throw failure('EISDIR', keyOf(path));
      return openInode(node);
    },
    stat: async (path) => statOf(find(path)),
    statThrough: async (path) => statOf(follow(path)),
    readFolder: async (path) => {
      const node = follow(path);
      if (node.kind !== 'folder') throw failure('ENOTDIR', keyOf(path));
      return [...node.names!].map(([name, child]) => ({ name: Buffer.from(name, 'latin1'), kind: child.kind }));
    },
    makeFolder: async (path) => {
      const { folder, name } = place(path);
      if (folder.names!.has(name)) throw failure('EEXIST', keyOf(path));
      folder.names!.set(name, makeInode('folder'));
    },
    syncFolder: async (path) => {
      const node = find(path);
      if (node.kind !== 'folder') throw failure('ENOTDIR', keyOf(path));
      node.durableNames = new Map(node.names);
    },
    link: async (from, to) => {
      const node = find(from);
      const { folder, name } = place(to);
      if (folder.names!.has(name)) throw failure('EEXIST', keyOf(to));
      folder.names!.set(name, node);
    },
    unlink: async (path) => {
      const { folder, name } = place(path);
      if (!folder.names!.delete(name)) throw failure('ENOENT', keyOf(path));
    },
    rename: async (from, to) => {
      const node = find(from);
      const source = place(from);
      const target = place(to);
      target.folder.names!.set(target.name, node);
      source.folder.names!.delete(source.name);
    },
    space: async () => currentSpace,
    realPath: async (path) => {
      follow(path);
      return `/${partsOf(path).join('/')}`;
    },
  };

  const disk: SimulatedDisk = {
    port,
    afterPowerCut: () => makeDisk(nowMs, durableCopy(top, new Map()), currentSpace),
    files: (under = '') => {
      const found = new Map<string, Buffer>();
      const walk = (node: Inode, path: string) => {
        for (const [name, child] of node.names ?? []) {
          if (child.kind === 'folder') walk(child, `${path}/${name}`);
          else if (child.kind === 'file') found.set(`${path}/${name}`, child.bytes);
        }
      };
      const start = under === '' ? top : findOrNothing(under);
      if (start !== undefined) walk(start, under);
      return new Map([...found].sort(([a], [b]) => (a < b ? -1 : 1)));
    },
    write: (path, bytes, modifiedMs) => {
      disk.makeFolders(Buffer.from(partsOf(path).slice(0, -1).join('/'), 'latin1'));
      const { folder, name } = place(path);
      const node = folder.names!.get(name) ?? makeInode('file');
      node.bytes = Buffer.from(bytes);
      node.durableBytes = node.bytes;
      node.modifiedNs = BigInt(Math.round(modifiedMs ?? nowMs())) * 1_000_000n;
      folder.names!.set(name, node);
      folder.durableNames!.set(name, node);
    },
    makeFolders: (path) => {
      let node = top;
      for (const part of partsOf(path)) {
        const next = node.names!.get(part) ?? makeInode('folder');
        node.names!.set(part, next);
        node.durableNames!.set(part, next);
        node = next;
      }
    },
    putLink: (path, target) => {
      const { folder, name } = place(path);
      folder.names!.set(name, { ...makeInode('link'), target });
    },
    putOther: (path) => {
      const { folder, name } = place(path);
      folder.names!.set(name, makeInode('other'));
    },
    remove: (path) => {
      const { folder, name } = place(path);
      folder.names!.delete(name);
      folder.durableNames!.delete(name);
    },
    move: (from, to) => {
      const source = place(from);
      const target = place(to);
      const node = find(from);
      source.folder.names!.delete(source.name);
      source.folder.durableNames!.delete(source.name);
      target.folder.names!.set(target.name, node);
      target.folder.durableNames!.set(target.name, node);
    },
    setSpace: (more) => {
      currentSpace = { ...currentSpace, ...more };
    },
    openCount: () => opened,
  };
  return disk;
}

function durableCopy(node: Inode, seen: Map<Inode, Inode>): Inode {
  const known = seen.get(node);
  if (known) return known;
  const copy: Inode = { ...node, bytes: node.durableBytes };
  seen.set(node, copy);
  if (node.durableNames) {
    const names = [...node.durableNames].map(([name, child]) => [name, durableCopy(child, seen)] as const);
    copy.names = new Map(names);
    copy.durableNames = new Map(names);
  }
  return copy;
}

function largest(node: Inode): bigint {
  return [...(node.names?.values() ?? [])].reduce((most, child) => {
    const own = largest(child);
    // biome-ignore lint/complexity/useMathMinMax: these are big integers
    return own > most ? own : most;
  }, node.number);
}
