/**
 * Share of the full signal that a steady train of pulses shows: (1 - E) sin a / (1 - E cos a) over sin a, E = exp(-TR/T1).
 *
 * @param repetitionS    time from pulse to pulse, s
 * @param t1S            longitudinal relaxation time, s
 * @param pulseAngleDeg  flip angle, degrees
 * @returns 0 to 1; areas are divided by it
 * @source Ernst, Anderson, Rev. Sci. Instrum. 1966, 37, 93; values at 90 and 30 degrees checked against the shared worked examples 5.6
 */
export function saturationOf(repetitionS: number, t1S: number, pulseAngleDeg: number): number {
  const decay = Math.exp(-repetitionS / t1S);
  return (1 - decay) / (1 - decay * Math.cos((pulseAngleDeg * Math.PI) / 180));
}
