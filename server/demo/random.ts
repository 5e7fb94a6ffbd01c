/** Numbers that look random and are the same for the same seed, on every machine. */
export interface Random {
  /** Uniform on [0, 1). */
  uniform(): number;
  /** Normal with mean 0 and deviation 1, to the accuracy of a sum of twelve uniforms: never beyond ±6. */
  normal(): number;
  /** Waiting time with a mean of 1. */
  exponential(): number;
}

/**
 * The generator that its author, Tommy Ettinger, called mulberry32 and gave to the public domain: a 32-bit counter,
 * mixed by shifts and products.
 *
 * @param seed  any whole number; its low 32 bits count
 */
export function randomFrom(seed: number): Random {
  let state = seed >>> 0;
  const uniform = () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61)) ^ mixed;
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 2 ** 32;
  };
  return {
    uniform,
    normal() {
      let sum = 0;
      for (let i = 0; i < 12; i++) sum += uniform();
      return sum - 6;
    },
    exponential: () => -Math.log(1 - uniform()),
  };
}

/**
 * A disturbance that forgets slowly: each value is `memory` times the one before plus fresh noise, so that its
 * deviation stays `deviation`.
 */
export function wandering(random: Random, deviation: number, memory: number): () => number {
  const fresh = deviation * Math.sqrt(1 - memory * memory);
  let value = deviation * random.normal();
  return () => {
    value = memory * value + fresh * random.normal();
    return value;
  };
}
