/** A value with its standard uncertainty (k = 1), both in the unit that the holding key names. */
export interface Quantity {
  readonly value: number;
  readonly u: number;
}
