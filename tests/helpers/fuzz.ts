import { mutateText, mutateValue } from './mutateDocument';

/** A hang, in processor time of this process: other work on the machine is not the input's doing. */
const LONGEST_MS = 2000;
const SHARE = Number(process.env.FUZZ_SHARE ?? '1');

/** Watches each input of a run for how long it takes. */
export interface FuzzWatch {
  /** Runs one input; whatever it throws is thrown with the input's number and the seed. */
  run<T>(at: number, judge: () => T): T;
  /** The same for what awaits files. */
  wait<T>(at: number, judge: () => Promise<T>): Promise<T>;
  /** Milliseconds of the slowest. */
  slowestMs(): number;
}

export function createFuzzWatch(seed: number): FuzzWatch {
  let slowest = 0;
  const begin = (): (() => void) => {
    const before = process.cpuUsage();
    return () => {
      const { user, system } = process.cpuUsage(before);
      slowest = Math.max(slowest, (user + system) / 1000);
    };
  };
  const blame = (at: number, error: unknown): Error =>
    new Error(`input ${at} of seed ${seed}: ${error instanceof Error ? error.stack : String(error)}`);
  return {
    run(at, judge) {
      const end = begin();
      try {
        return judge();
      } catch (error) {
        throw blame(at, error);
      } finally {
        end();
      }
    },
    async wait(at, judge) {
      const end = begin();
      try {
        return await judge();
      } catch (error) {
        throw blame(at, error);
      } finally {
        end();
      }
    },
    slowestMs: () => slowest,
  };
}

/** Inputs of a run: the number given, or the share of it that FUZZ_SHARE asks for (0.01…10), at least 100. */
export const fuzzCount = (whole: number): number => Math.max(100, Math.round(whole * SHARE));

export function expectNoHang(watch: FuzzWatch): void {
  expect(watch.slowestMs()).toBeLessThan(LONGEST_MS);
}

/** A text or a value that began as one of `texts` and was changed in one to five places. */
export function mutantOf(texts: readonly string[], random: () => number): unknown {
  const text = texts[Math.floor(random() * texts.length)]!;
  if (random() < 0.3) return mutateText(text, random);
  const value: unknown = JSON.parse(text);
  for (let times = 1 + Math.floor(random() ** 2 * 5); times > 0; times -= 1) mutateValue(value, random);
  return random() < 0.3 ? JSON.stringify(value) : value;
}

function joined(before: Uint8Array, after: Uint8Array): Uint8Array {
  const out = new Uint8Array(before.length + after.length);
  out.set(before);
  out.set(after, before.length);
  return out;
}

/** Bytes changed in one to three places: bits, a number in either byte order, a slice lost, doubled, moved or overwritten. */
export function mutateBytes(bytes: Uint8Array, random: () => number): Uint8Array {
  let now: Uint8Array = bytes.slice();
  const upTo = (most: number): number => Math.floor(random() * most);
  for (let times = 1 + Math.floor(random() ** 3 * 3); times > 0 && now.length > 0; times -= 1) {
    const at = upTo(now.length);
    const length = Math.min(now.length - at, 1 + Math.floor(random() ** 3 * 400));
    switch (upTo(7)) {
      case 0:
        now[at]! ^= 1 << upTo(8);
        break;
      case 1:
        now[at] = [0, 255, 127, 128, 10, 44, 45, 80][upTo(8)]!;
        break;
      case 2:
        if (at + 4 <= now.length)
          new DataView(now.buffer, at).setUint32(
            0,
            [0, 1, 0xffffffff, 0x7fffffff, upTo(65536)][upTo(5)]!,
            random() < 0.5,
          );
        break;
      case 3:
        now = joined(now.subarray(0, at), now.subarray(at + length));
        break;
      case 4:
        now = joined(now.subarray(0, at + length), now.subarray(at));
        break;
      case 5:
        now.copyWithin(upTo(now.length), at, at + length);
        break;
      default:
        now = now.slice(0, at);
    }
  }
  return now;
}
