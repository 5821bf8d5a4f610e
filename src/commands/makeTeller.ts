import type { SiteFile } from '../method/site.js';
import { pathText } from '../record/bytePath.js';
import type { RecordContext } from '../record/recordContext.js';
import { appendTold, readTold } from '../record/told.js';
import { deliver, type Outbox, type Patience } from '../tell/deliver.js';
import { makeMessage, messagesOf } from '../tell/messagesOf.js';
import { targetsOf } from '../tell/targetsOf.js';
import type { WatchNews } from '../watch/watchNews.js';
import { printProblem } from './printProblem.js';

/** Joins what a watch learns to the site's targets; `undefined` when the site names none. */
export function makeTeller(context: RecordContext, site: SiteFile | undefined): ((news: WatchNews) => Promise<void>) | undefined {
  if (!site || site.tell.length === 0) return undefined;
  const targets = targetsOf(site.tell, process.env);
  const patience: Patience = { nextMs: new Map(), failures: new Map() };
  const toldHere: Outbox['told'][number][] = [];
  const nowMs = () => context.clock.monotonicMs();
  return async (news) => {
    if (news.kind === 'trouble') {
      // Trouble may be that the record cannot be written: it is remembered in this process only.
      const message = makeMessage(news.run ?? 'share', 'trouble', news.code, news.message, undefined);
      const outbox: Outbox = { told: toldHere, record: async ({ key, to, state }) => void toldHere.push({ key, to, state }) };
      await deliver([message], targets, outbox, patience, nowMs);
      return;
    }
    const report = `${pathText(news.folder)}/report.html`;
    const messages =
      news.kind === 'silent'
        ? [
            makeMessage(
              news.run,
              'silent',
              news.series.points.at(-1)?.sha256 ?? 'run',
              `no new file for ${news.minutes} min, since ${news.sinceUtc}`,
              report,
            ),
          ]
        : messagesOf(news.series, report);
    const outbox: Outbox = {
      told: [...readTold(news.lines), ...toldHere],
      record: async (entry) => {
        toldHere.push(entry);
        const written = await appendTold(context, news.folder, news.run, [entry]);
        if (!written.ok) printProblem(written.problem);
      },
    };
    await deliver(messages, targets, outbox, patience, nowMs);
  };
}
