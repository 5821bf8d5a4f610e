import { blockingStatPort } from '../record/filePort.js';
import { makeShareReader } from './shareReader.js';

/** What the watcher asks of the reading process. */
export type ShareRequest =
  | { readonly ask: 'list' }
  | { readonly ask: 'read'; readonly names: readonly Uint8Array[] }
  | { readonly ask: 'readPath'; readonly path: string };

/** Runs in a process of its own, because a hung server hangs whoever asks it. */
const reader = makeShareReader(blockingStatPort, process.argv[2] ?? '');

process.on('message', async (request: ShareRequest) => {
  process.send?.(await answer(request));
});
process.on('disconnect', () => process.exit(0));

function answer(request: ShareRequest): Promise<unknown> {
  switch (request.ask) {
    case 'list':
      return reader.list();
    case 'read':
      return reader.read(request.names.map((name) => Buffer.from(name)));
    case 'readPath':
      return reader.readPath(request.path);
  }
}
