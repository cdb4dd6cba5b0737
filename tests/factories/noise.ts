/** Random numbers that are the same in every run of a test: mulberry32 for uniform, Box–Muller for normal ones. */
export function noise(seed: number) {
  let state = seed >>> 0;
  function uniform(): number {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = state;
    t = Math.imul(t ^ (t >>> 15), t | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 2 ** 32;
  }
  function normal(): number {
    return Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform());
  }
  return { uniform, normal };
}
