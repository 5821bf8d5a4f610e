import type { HeaderNumber } from './parseNumber.js';
import type { JcampRecord } from './walkRecords.js';

/** One table of a block with what the header states about its ordinates. */
export interface TablePlan {
  readonly role: 'real' | 'imag';
  readonly record: JcampRecord;
  readonly pointsStated: number;
  readonly factor: HeaderNumber;
  readonly first?: HeaderNumber;
  readonly last?: HeaderNumber;
  readonly min?: HeaderNumber;
  readonly max?: HeaderNumber;
}

/** The abscissa as the header states it, in seconds, hertz or ppm. */
export interface AbscissaPlan {
  readonly unit: 's' | 'Hz' | 'ppm';
  /** 1, or what turns the file's unit into `unit` (milliseconds: 1e-3). */
  readonly scale: number;
  readonly first: HeaderNumber;
  readonly last: HeaderNumber;
  readonly factor: HeaderNumber;
  readonly delta?: HeaderNumber;
  readonly min?: HeaderNumber;
  readonly max?: HeaderNumber;
}

/** Where the numbers of a block lie and what must hold of them. */
export interface Layout {
  readonly abscissa: AbscissaPlan;
  readonly tables: readonly TablePlan[];
}
