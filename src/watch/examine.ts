import { statSync } from 'node:fs';
import { createRequire } from 'node:module';
import { programVersion } from '../base/version.js';
import type { RecordContext } from '../record/recordContext.js';
import { examineOutput } from './examineOutput.js';
import { examineSettings } from './examineSettings.js';
import { examineShare } from './examineShare.js';

/** One thing that `doctor` looked at, with what to do when it is not well. */
export interface Finding {
  readonly name: string;
  readonly state: 'pass' | 'warn' | 'fail';
  readonly message: string;
  readonly fix?: string;
}

export interface DoctorQuestion {
  readonly share?: string;
  readonly out?: string;
  readonly method?: string;
  readonly site?: string;
}

/** Looks at everything that a night needs; changes nothing. */
export async function examine(context: RecordContext, question: DoctorQuestion): Promise<Finding[]> {
  const findings = [...ofProgram(), ...ofClock(context)];
  if (question.share !== undefined) findings.push(...(await examineShare(context, question.share)));
  if (question.out !== undefined) findings.push(...(await examineOutput(context, question.out, question.share)));
  findings.push(...(await examineSettings(context, question)));
  return findings;
}

const nodeMajor = 20;
const nodeMinor = 19;

function ofProgram(): Finding[] {
  const [major = 0, minor = 0] = process.versions.node.split('.').map(Number);
  const isNew = major > nodeMajor || (major === nodeMajor && minor >= nodeMinor);
  const versions: Finding = {
    name: 'versions',
    state: isNew ? 'pass' : 'fail',
    message: `kinetrail ${programVersion}, Node.js ${process.versions.node}, ${process.platform} ${process.arch}`,
    ...(isNew ? {} : { fix: `Install Node.js ${nodeMajor}.${nodeMinor} or newer.` }),
  };
  return [versions, fonts()];
}

function fonts(): Finding {
  const font = 'dejavu-fonts-ttf/ttf/DejaVuSans.ttf';
  try {
    const path = createRequire(import.meta.url).resolve(font);
    return { name: 'fonts', state: 'pass', message: `the fonts of the PDF report are installed (${statSync(path).size} bytes)` };
  } catch {
    return {
      name: 'fonts',
      state: 'fail',
      message: `the fonts of the PDF report are missing (${font})`,
      fix: 'Install the packages again: npm ci.',
    };
  }
}

function ofClock({ clock }: RecordContext): Finding[] {
  const now = new Date(clock.nowMs());
  const zone = Intl.DateTimeFormat().resolvedOptions().timeZone;
  const offset = clock.utcOffsetMin();
  const isPlausible = now.getUTCFullYear() >= 2024 && now.getUTCFullYear() < 2100;
  return [
    {
      name: 'clock',
      state: isPlausible ? 'pass' : 'fail',
      message: `it is ${now.toISOString()}; time zone ${zone}, ${offset} min from UTC`,
      ...(isPlausible ? {} : { fix: 'Set the clock; times in the record are taken from it.' }),
    },
  ];
}
