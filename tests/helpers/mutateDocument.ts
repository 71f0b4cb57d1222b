/** A small seeded generator (mulberry32): the same documents on every machine, and a seed that a failure can name. */
export function seededRandom(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 2 ** 32;
  };
}

const hostile: readonly (() => unknown)[] = [
  () => null,
  () => true,
  () => -1,
  () => -0,
  () => 0,
  () => 0.5,
  () => 1e308,
  () => NaN,
  () => Infinity,
  () => 2 ** 31,
  () => 2 ** 53,
  () => '',
  () => 'k1',
  () => '\ud800',
  () => 'a\u0000b',
  () => '𝄞'.repeat(61),
  () => [],
  () => [[]],
  () => ({}),
  () => ({ kind: 'none' }),
  () => ({ kind: 'pn', stages: 2, taps: [1, 2], seed: 3, inverted: false }),
  () => new Array(20_000).fill(0),
  () => new Array(2_000).fill([1, 1]),
];

function keyIn(holder: object, random: () => number): string | null {
  if (Array.isArray(holder)) return holder.length === 0 ? null : String(Math.floor(random() * holder.length));
  const keys = Object.keys(holder);
  return keys[Math.floor(random() * keys.length)] ?? null;
}

/** A place somewhere in the document, by walking down from the top: deep and shallow ones, big lists no oftener than small. */
function placeIn(document: unknown, random: () => number): { holder: Record<string, unknown>; key: string } | null {
  let holder = document as Record<string, unknown>;
  let key = keyIn(holder, random);
  for (;;) {
    const inner = key === null ? null : holder[key];
    if (typeof inner !== 'object' || inner === null || random() < 0.15) return key === null ? null : { holder, key };
    const innerKey = keyIn(inner, random);
    if (innerKey === null) return key === null ? null : { holder, key };
    holder = inner as Record<string, unknown>;
    key = innerKey;
  }
}

/** Changes one thing in place: a value swapped for a hostile or a neighbouring one, a key or an entry lost, added or doubled. */
export function mutateValue(document: unknown, random: () => number): void {
  const pick = <T>(list: readonly T[]): T => list[Math.floor(random() * list.length)]!;
  const place = placeIn(document, random);
  if (place === null) return;
  const { holder, key } = place;
  const old = holder[key];
  const way = Math.floor(random() * 8);
  if (way === 0) delete holder[key];
  else if (way === 1 && !Array.isArray(holder)) {
    const added = pick(['extra', 'kind', 'value', 'length', '__proto__', 'toString']);
    Object.defineProperty(holder, added, {
      value: pick(hostile)(),
      enumerable: true,
      writable: true,
      configurable: true,
    });
  } else if (way === 2 && Array.isArray(holder)) holder.splice(Number(key), random() < 0.5 ? 1 : 0, old);
  else if (way === 3 && Array.isArray(holder)) holder.length = Math.floor(random() * holder.length);
  else if (way === 4 && Array.isArray(holder)) holder.push(structuredClone(pick(holder)));
  else if (typeof old === 'number' && way < 7) holder[key] = old + pick([-1, 1, 0.5, -2 * old, 1e6, old]);
  else if (typeof old === 'boolean') holder[key] = !old;
  else holder[key] = pick(hostile)();
}

/** Changes a text: a slice lost, doubled or moved, a character changed, brackets put in. */
export function mutateText(text: string, random: () => number): string {
  const at = Math.floor(random() * text.length);
  const length = 1 + Math.floor(random() ** 3 * 200);
  const slice = text.slice(at, at + length);
  switch (Math.floor(random() * 6)) {
    case 0:
      return text.slice(0, at) + text.slice(at + length);
    case 1:
      return text.slice(0, at) + slice + text.slice(at);
    case 2:
      return text.slice(0, at) + String.fromCharCode(Math.floor(random() * 128)) + text.slice(at + 1);
    case 3:
      return `${text.slice(0, at)}${'[{"a":'.repeat(length)}${text.slice(at)}`;
    case 4:
      return `${text.slice(0, at)}${Math.floor(random() * 1000)}${text.slice(at)}`;
    default:
      return text.slice(0, at);
  }
}
