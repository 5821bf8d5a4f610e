import { fail, type Result } from '../base/result.js';
import { sha256 } from '../base/sha256.js';
import type { Method } from '../method/method.js';
import { readMethod } from '../method/readMethod.js';
import type { PointRecord } from '../point/pointRecord.js';
import { processTimePoint } from '../point/processTimePoint.js';
import type { MeasureTask } from '../record/measurer.js';

const methods = new Map<string, Method>();
const methodsMax = 32;

/** Measures one file with a method given as text; the method is read once and kept. */
export function measureTask({ bytes, fileName, methodText, methodFile }: MeasureTask): Result<readonly PointRecord[]> {
  const key = sha256(methodText);
  let method = methods.get(key);
  if (method === undefined) {
    const read = readMethod(methodText, methodFile);
    if (!read.ok) return fail(read.problem[0]!);
    method = read.value;
    if (methods.size >= methodsMax) methods.clear();
    methods.set(key, method);
  }
  return processTimePoint(bytes, fileName, method);
}
