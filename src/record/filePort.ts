import { constants, lstatSync } from 'node:fs';
import { link, lstat, mkdir, open, readdir, realpath, rename, stat, statfs, unlink } from 'node:fs/promises';

/** A path as the program was given it, or as bytes when it came out of a folder listing (names need not be UTF-8). */
export type Path = string | Buffer;

export type FileKind = 'file' | 'folder' | 'link' | 'other';

export interface FileStat {
  readonly kind: FileKind;
  readonly sizeBytes: number;
  readonly modifiedNs: bigint;
  readonly inode: bigint;
  readonly device: bigint;
}

export interface FolderEntry {
  readonly name: Buffer;
  readonly kind: FileKind;
}

export interface FolderSpace {
  readonly freeBytes: number;
  readonly freeInodes: number;
  readonly inodes: number;
  /** File system type number of the operating system. */
  readonly type: number;
}

/**
 * `read`: regular or not, never waits on a pipe, never follows a link in the last part.
 * `create`: a new file, fails when the name is taken. `append`: an existing file, read and written at its end.
 */
export type OpenMode = 'read' | 'create' | 'append';

export interface OpenFile {
  /** Reads into `target` from `position`; returns the bytes read, 0 at the end. */
  read(target: Uint8Array, position: number): Promise<number>;
  /** Writes at the end of the file; returns the bytes written, which may be fewer than asked. */
  write(bytes: Uint8Array): Promise<number>;
  stat(): Promise<FileStat>;
  sync(): Promise<void>;
  dataSync(): Promise<void>;
  truncate(sizeBytes: number): Promise<void>;
  close(): Promise<void>;
}

/** Every use of a disk by the record and the watcher goes through this one interface, so that every fault can be tested. */
export interface FilePort {
  open(path: Path, mode: OpenMode): Promise<OpenFile>;
  /** Of the name itself: a link is a link. */
  stat(path: Path): Promise<FileStat>;
  /** Of what a link leads to. */
  statThrough(path: Path): Promise<FileStat>;
  readFolder(path: Path): Promise<FolderEntry[]>;
  makeFolder(path: Path): Promise<void>;
  syncFolder(path: Path): Promise<void>;
  /** Gives a file a second name; fails when the name is taken. */
  link(from: Path, to: Path): Promise<void>;
  unlink(path: Path): Promise<void>;
  /** Replaces `to` when it exists. */
  rename(from: Path, to: Path): Promise<void>;
  space(path: Path): Promise<FolderSpace>;
  realPath(path: Path): Promise<string>;
}

const fileMode = 0o640;
const folderMode = 0o750;

const openFlags: Record<OpenMode, number> = {
  read: constants.O_RDONLY | constants.O_NONBLOCK | constants.O_NOFOLLOW,
  create: constants.O_WRONLY | constants.O_CREAT | constants.O_EXCL | constants.O_APPEND,
  append: constants.O_RDWR | constants.O_APPEND | constants.O_NOFOLLOW,
};

/** The operating system's files. */
export const realFilePort: FilePort = {
  open: openReal,
  stat: async (path) => statOf(await lstat(path, { bigint: true })),
  statThrough: async (path) => statOf(await stat(path, { bigint: true })),
  readFolder: async (path) => {
    const entries = await readdir(path, { encoding: 'buffer', withFileTypes: true });
    return entries.map((entry) => ({ name: entry.name as unknown as Buffer, kind: kindOf(entry) }));
  },
  makeFolder: (path) => mkdir(path, { mode: folderMode }),
  syncFolder: async (path) => {
    const folder = await open(path, constants.O_RDONLY | constants.O_DIRECTORY);
    try {
      await folder.sync();
    } finally {
      await folder.close();
    }
  },
  link,
  unlink,
  rename,
  space: async (path) => {
    const space = await statfs(path);
    return { freeBytes: space.bavail * space.bsize, freeInodes: space.ffree, inodes: space.files, type: space.type };
  },
  realPath: async (path) => realpath(path),
};

/**
 * The same, where a stat blocks its process: several times faster for thousands of files, and right only in the reading process,
 * which does nothing else and can be killed.
 */
export const blockingStatPort: FilePort = {
  ...realFilePort,
  stat: async (path) => statOf(lstatSync(path, { bigint: true })),
};

async function openReal(path: Path, mode: OpenMode): Promise<OpenFile> {
  const handle = await open(path, openFlags[mode], fileMode);
  return {
    read: async (target, position) => (await handle.read(target, 0, target.byteLength, position)).bytesRead,
    write: async (bytes) => (await handle.write(bytes, 0, bytes.byteLength)).bytesWritten,
    stat: async () => statOf(await handle.stat({ bigint: true })),
    sync: () => handle.sync(),
    dataSync: () => handle.datasync(),
    truncate: (sizeBytes) => handle.truncate(sizeBytes),
    close: () => handle.close(),
  };
}

interface KindSource {
  isFile(): boolean;
  isDirectory(): boolean;
  isSymbolicLink(): boolean;
}

function kindOf(source: KindSource): FileKind {
  if (source.isFile()) return 'file';
  if (source.isDirectory()) return 'folder';
  return source.isSymbolicLink() ? 'link' : 'other';
}

function statOf(status: KindSource & { size: bigint; mtimeNs: bigint; ino: bigint; dev: bigint }): FileStat {
  return {
    kind: kindOf(status),
    sizeBytes: Number(status.size),
    modifiedNs: status.mtimeNs,
    inode: status.ino,
    device: status.dev,
  };
}
