import { mkdir, open } from 'node:fs/promises';
import { join } from 'node:path';
import type { Message, Target } from './message.js';

/**
 * A file drop: one JSON file a message in a folder, named by event and key, never overwritten.
 *
 * @param folder made if missing
 */
export function fileTarget(folder: string, on: readonly string[]): Target {
  return {
    name: `file ${folder}`,
    on,
    send: async (message: Message) => {
      await mkdir(folder, { recursive: true });
      try {
        await using file = await open(join(folder, `${message.event}-${message.key}.json`), 'wx', 0o640);
        await file.writeFile(`${JSON.stringify(message, null, 2)}\n`);
        await file.sync();
      } catch (cause) {
        // There already: it was delivered before a crash.
        if ((cause as NodeJS.ErrnoException).code !== 'EEXIST') throw cause;
      }
      return undefined;
    },
  };
}
