/** A plain, slow transform and friends: an independent reference for accuracy tests. Its angles come from the engine's Math. */

/** Σ input[k] e^{sign·j2πkn/size} term by term with compensated sums; angles reduced in whole numbers. */
export function directTransform(input: Float64Array, sign: 1 | -1): Float64Array {
  const size = input.length / 2;
  const output = new Float64Array(input.length);
  for (let n = 0; n < size; n++) {
    const re = new Sum();
    const im = new Sum();
    for (let k = 0; k < size; k++) {
      const [c, s] = unit((k * n) % size, size);
      re.add(input[2 * k]! * c);
      re.add(-sign * input[2 * k + 1]! * s);
      im.add(input[2 * k + 1]! * c);
      im.add(sign * input[2 * k]! * s);
    }
    output[2 * n] = re.total;
    output[2 * n + 1] = im.total;
  }
  return output;
}

/** [cos, sin] of 2π·part/whole, folded into the first octant so that the angle's own rounding stays small. */
export function unit(part: number, whole: number): [number, number] {
  if (part < 0) {
    const [c, s] = unit(-part, whole);
    return [c, -s];
  }
  const turn = part % whole;
  if (2 * turn > whole) {
    const [c, s] = unit(whole - turn, whole);
    return [c, -s];
  }
  if (4 * turn > whole) {
    const [c, s] = unit(whole / 2 - turn, whole);
    return [-c, s];
  }
  if (8 * turn > whole) {
    const [c, s] = unit(whole / 4 - turn, whole);
    return [s, c];
  }
  const angle = (2 * Math.PI * turn) / whole;
  return [Math.cos(angle), Math.sin(angle)];
}

class Sum {
  private sum = 0;
  private lost = 0;
  add(value: number): void {
    const next = this.sum + value;
    this.lost += Math.abs(this.sum) >= Math.abs(value) ? this.sum - next + value : value - next + this.sum;
    this.sum = next;
  }
  get total(): number {
    return this.sum + this.lost;
  }
}

/** 10 lg of the error's energy over the reference's; −400 for equal arrays. */
export function relativeDb(found: Float64Array, reference: Float64Array): number {
  let error = 0;
  let energy = 0;
  for (let i = 0; i < reference.length; i++) {
    error += (found[i]! - reference[i]!) ** 2;
    energy += reference[i]! ** 2;
  }
  return error === 0 ? -400 : 10 * Math.log10(error / energy);
}

/** Repeatable noise in ±1, `count` complex numbers. */
export function noise(count: number, seed: number): Float64Array {
  let state = seed >>> 0 || 1;
  return Float64Array.from({ length: 2 * count }, () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 2147483648 - 1;
  });
}
