import { type MeasureTask, makeMeasurer } from '../record/measurer.js';
import { measureTask } from './measureTask.js';

/** Runs in a process of its own: one file after the other comes in as a message, its outcome goes out. */
const measurer = makeMeasurer(measureTask);

process.on('message', async (task: MeasureTask) => {
  process.send?.(await measurer.measure(task));
});
process.on('disconnect', () => process.exit(0));
