import { joinPath } from '../record/bytePath.js';
import type { Path } from '../record/filePort.js';
import type { RunListing } from './shareListing.js';
import type { WatchSession } from './watchTypes.js';

/** The output folder of a run mirrors its place on the share. */
export function runFolderOf(session: Pick<WatchSession, 'settings'>, listing: RunListing): Path {
  return joinPath(session.settings.outputFolder, ...listing.names);
}
