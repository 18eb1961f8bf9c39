// Unpacks one .lzma file (LZMA with its 13-byte header: properties, dictionary size, length) into
// a Uint8Array of the length that its header states. After the format's public description: Igor
// Pavlov, LZMA specification, 2015. The output doubles as the dictionary.
function unlzma(packed) {
  "use strict";

  const LITERAL_SIZE = 0x300;
  const STATES = 12;
  const POSITIONS = 16;

  const properties = packed[0];
  const literalContext = properties % 9;
  const literalPosition = Math.floor(properties / 9) % 5;
  const positionMask = (1 << Math.floor(properties / 45)) - 1;
  const length = new DataView(packed.buffer, packed.byteOffset).getUint32(5, true);
  const out = new Uint8Array(length);

  // Every probability is that of a 0, in 2048ths; all start even.
  const even = (count) => new Uint16Array(count).fill(1024);

  // The range decoder. Its first byte is always 0.
  let next = 14;
  let range = 0xffffffff;
  let code = 0;
  const shift = () => ((code << 8) | packed[next++]) >>> 0;
  for (let i = 0; i < 4; i += 1) code = shift();

  function normalise() {
    if (range < 0x1000000) {
      range = (range << 8) >>> 0;
      code = shift();
    }
  }

  function bit(probabilities, at) {
    const probability = probabilities[at];
    const bound = (range >>> 11) * probability;
    let value = 0;
    if (code < bound) {
      range = bound;
      probabilities[at] = probability + ((2048 - probability) >>> 5);
    } else {
      range -= bound;
      code -= bound;
      probabilities[at] = probability - (probability >>> 5);
      value = 1;
    }
    normalise();
    return value;
  }

  function evenBits(count) {
    let value = 0;
    for (let i = 0; i < count; i += 1) {
      range >>>= 1;
      const one = code >= range ? 1 : 0;
      if (one) code -= range;
      normalise();
      value = value * 2 + one;
    }
    return value;
  }

  // A number whose bits are coded from the highest, each in the light of those before it.
  function tree(probabilities, first, bits) {
    let node = 1;
    for (let i = 0; i < bits; i += 1) node = node * 2 + bit(probabilities, first + node);
    return node - (1 << bits);
  }

  // The same from the lowest bit.
  function reverseTree(probabilities, first, bits) {
    let node = 1;
    let value = 0;
    for (let i = 0; i < bits; i += 1) {
      const one = bit(probabilities, first + node);
      node = node * 2 + one;
      value |= one << i;
    }
    return value;
  }

  const lengthCoder = () => ({
    choice: even(2),
    low: even(POSITIONS << 3),
    middle: even(POSITIONS << 3),
    high: even(256),
  });
  function matchLength(coder, position) {
    if (!bit(coder.choice, 0)) return 2 + tree(coder.low, position << 3, 3);
    if (!bit(coder.choice, 1)) return 10 + tree(coder.middle, position << 3, 3);
    return 18 + tree(coder.high, 0, 8);
  }

  const literals = even(LITERAL_SIZE << (literalContext + literalPosition));
  const isMatch = even(STATES * POSITIONS);
  const isRepeat = even(STATES);
  const isNotLast = even(STATES);
  const isNotSecond = even(STATES);
  const isNotThird = even(STATES);
  const isLong = even(STATES * POSITIONS);
  const slots = even(4 * 64);
  const middleDistances = even(128);
  const lowDistances = even(16);
  const matchLengths = lengthCoder();
  const repeatLengths = lengthCoder();

  function distance(length) {
    const slot = tree(slots, Math.min(length - 2, 3) << 6, 6);
    if (slot < 4) return slot;
    const bits = (slot >> 1) - 1;
    const base = (2 | (slot & 1)) << bits;
    if (slot < 14) return base + reverseTree(middleDistances, base - slot, bits);
    return base + evenBits(bits - 4) * 16 + reverseTree(lowDistances, 0, 4);
  }

  function literal(at, state, last) {
    const before = at > 0 ? out[at - 1] : 0;
    const place = ((at & ((1 << literalPosition) - 1)) << literalContext) + (before >> (8 - literalContext));
    const first = LITERAL_SIZE * place;
    let symbol = 1;
    if (state >= 7) {
      // After a match the byte that would have continued it tells what comes less probably.
      let expected = out[at - last - 1];
      while (symbol < 0x100) {
        const guess = (expected >> 7) & 1;
        expected <<= 1;
        const one = bit(literals, first + ((1 + guess) << 8) + symbol);
        symbol = symbol * 2 + one;
        if (one !== guess) break;
      }
    }
    while (symbol < 0x100) symbol = symbol * 2 + bit(literals, first + symbol);
    return symbol & 0xff;
  }

  let state = 0;
  let [last, second, third, fourth] = [0, 0, 0, 0];
  let at = 0;
  while (at < length) {
    if (next > packed.length + 4) throw new Error("the packed program is cut short");
    const position = at & positionMask;
    const context = state * POSITIONS + position;
    if (!bit(isMatch, context)) {
      out[at] = literal(at, state, last);
      at += 1;
      state = state < 4 ? 0 : state < 10 ? state - 3 : state - 6;
      continue;
    }
    let count;
    if (!bit(isRepeat, state)) {
      [fourth, third, second] = [third, second, last];
      count = matchLength(matchLengths, position);
      last = distance(count);
      state = state < 7 ? 7 : 10;
    } else {
      let single = false;
      if (!bit(isNotLast, state)) {
        single = !bit(isLong, context);
      } else if (!bit(isNotSecond, state)) {
        [last, second] = [second, last];
      } else if (!bit(isNotThird, state)) {
        [last, second, third] = [third, last, second];
      } else {
        [last, second, third, fourth] = [fourth, last, second, third];
      }
      count = single ? 1 : matchLength(repeatLengths, position);
      state = single ? (state < 7 ? 9 : 11) : state < 7 ? 8 : 11;
    }
    const from = at - last - 1;
    if (from < 0) throw new Error("the packed program is damaged");
    const end = Math.min(at + count, length);
    for (let read = from; at < end; at += 1, read += 1) out[at] = out[read];
  }
  return out;
}
