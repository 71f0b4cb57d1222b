/**
 * A compensated running sum (Neumaier's form): the error stays near one rounding of the result whatever the length.
 * Source: Neumaier, Rundungsfehleranalyse einiger Verfahren zur Summation endlicher Summen, 1974.
 */
export interface CompensatedSum {
  add(value: number): void;
  total(): number;
}

/** A new compensated sum, empty. Finite values of either sign, in any order; allocates nothing per value. */
export function createSum(): CompensatedSum {
  let sum = 0;
  let lost = 0;
  return {
    add(value) {
      const next = sum + value;
      lost += Math.abs(sum) >= Math.abs(value) ? sum - next + value : value - next + sum;
      sum = next;
    },
    total: () => sum + lost,
  };
}
