/**
 * How one column of a string's day is packed: a value is the level of its frame (the mean over the units that told it),
 * plus the share of its unit (the mean distance from that level over SPAN frames), plus a rest. Rests are small, the
 * meters' noise, and are written with as many bits as the largest of SPAN frames needs. Everything is reckoned modulo
 * 2¹⁶, so that any int2 comes back as it was. `unpack_values` in the database is the other reader of this.
 */

/** Frames that have one share a unit and one width of rests; fixed in what is stored. */
export const SPAN = 60;
/** In place of NULL. */
export const NONE = 0x7fff_ffff;

export interface PackedValues {
  /** int2 a frame. */
  level: number[];
  /** int2 a span and slot. */
  share: number[];
  /** Bits of a rest, a span: 0 … 16. */
  width: number[];
  /** Where a span's rests begin, bytes from 0. */
  start: number[];
  rest: Buffer;
  /** Which slots have a value, a frame, bit (position − 1); null: those of the frame's own mask. */
  has: bigint[] | null;
}

/** The nearest int2 that is the same modulo 2¹⁶. */
const wrapped = (x: number): number => (x << 16) >> 16;
/** 0, −1, 1, −2 … as 0, 1, 2, 3 …, so that small rests need few bits. */
const folded = (x: number): number => ((x << 1) ^ (x >> 31)) & 0xffff;
const unfolded = (z: number): number => (z >>> 1) ^ -(z & 1);

/**
 * @param values frames × slots in order, NONE for NULL; each else an int2
 * @param mask of the frames, bit (position − 1) set: that unit reported
 * @param slots 1 … 63
 */
export function packValues(values: Int32Array, slots: number, mask: readonly bigint[]): PackedValues {
  const frames = values.length / slots;
  const level = new Array<number>(frames);
  const share: number[] = [];
  const width: number[] = [];
  const start: number[] = [];
  const rests = new Uint16Array(values.length);
  const distance = new Float64Array(slots);
  const told = new Int32Array(slots);
  const parts: Uint8Array[] = [];
  let bytes = 0;
  for (let f = 0; f < frames; f++) {
    let sum = 0;
    let n = 0;
    for (let i = f * slots; i < (f + 1) * slots; i++)
      if (values[i] !== NONE) {
        sum += values[i]!;
        n++;
      }
    level[f] = n > 0 ? Math.round(sum / n) : 0;
  }
  for (let from = 0; from < frames; from += SPAN) {
    const to = Math.min(frames, from + SPAN);
    distance.fill(0);
    told.fill(0);
    for (let f = from, i = from * slots; f < to; f++)
      for (let s = 0; s < slots; s++, i++)
        if (values[i] !== NONE) {
          distance[s]! += values[i]! - level[f]!;
          told[s]!++;
        }
    const shares = Array.from(told, (n, s) => (n > 0 ? wrapped(Math.round(distance[s]! / n)) : 0));
    share.push(...shares);
    let bits = 0;
    for (let f = from, i = from * slots; f < to; f++)
      for (let s = 0; s < slots; s++, i++) {
        rests[i] = values[i] === NONE ? 0 : folded(wrapped(values[i]! - level[f]! - shares[s]!));
        bits |= rests[i]!;
      }
    const w = 32 - Math.clz32(bits);
    const part = writeBits(rests.subarray(from * slots, to * slots), w);
    width.push(w);
    start.push(bytes);
    parts.push(part);
    bytes += part.length;
  }
  // readers take three bytes at once, also at the end
  const rest = Buffer.concat([...parts, new Uint8Array(2)]);
  return { level, share, width, start, rest, has: ownMask(values, slots, mask) };
}

function writeBits(values: Uint16Array, width: number): Uint8Array {
  const out = new Uint8Array(Math.ceil((values.length * width) / 8));
  if (width === 0) return out;
  let held = 0;
  let bits = 0;
  let at = 0;
  for (const value of values) {
    held |= value << bits;
    bits += width;
    for (; bits >= 8; bits -= 8) {
      out[at++] = held;
      held >>>= 8;
    }
  }
  if (bits > 0) out[at] = held;
  return out;
}

/** Bits of the slots that have a value, a frame; null where these are the mask's own. */
function ownMask(values: Int32Array, slots: number, mask: readonly bigint[]): bigint[] | null {
  let same = true;
  const own = mask.map((reported, f) => {
    let low = 0;
    let high = 0;
    for (let s = 0, i = f * slots; s < slots; s++, i++)
      if (values[i] !== NONE) {
        if (s < 32) low |= 1 << s;
        else high |= 1 << (s - 32);
      }
    const bits = (BigInt(high >>> 0) << 32n) | BigInt(low >>> 0);
    same &&= bits === reported;
    return bits;
  });
  return same ? null : own;
}

/** What `packValues` was given. */
export function unpackValues(packed: PackedValues, slots: number, mask: readonly bigint[]): Int32Array {
  const { level, share, width, start, rest } = packed;
  const has = packed.has ?? mask;
  const values = new Int32Array(level.length * slots);
  for (let f = 0, i = 0; f < level.length; f++) {
    const span = Math.floor(f / SPAN);
    const w = width[span]!;
    const low = Number(has[f]! & 0xffff_ffffn);
    const high = Number(has[f]! >> 32n);
    for (let s = 0; s < slots; s++, i++) {
      if (((s < 32 ? low >>> s : high >>> (s - 32)) & 1) === 0) {
        values[i] = NONE;
        continue;
      }
      const bit = ((f % SPAN) * slots + s) * w;
      const at = start[span]! + (bit >>> 3);
      const three = rest[at]! | (rest[at + 1]! << 8) | (rest[at + 2]! << 16);
      const z = (three >>> (bit & 7)) & ((1 << w) - 1);
      values[i] = wrapped(level[f]! + share[span * slots + s]! + unfolded(z));
    }
  }
  return values;
}
