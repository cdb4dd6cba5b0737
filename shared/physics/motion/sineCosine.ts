/**
 * Sine and cosine from additions and multiplications alone. Those are the same on every machine, and
 * the library's own functions may differ in their last digit from browser to browser: phone and server
 * are to print the same digits.
 *
 * @param x  rad, |x| below 1000
 * @returns  right to about 2e-16
 * @see Taylor's series after subtracting multiples of π/2 in two parts (Cody & Waite 1980, from memory)
 */
export function sineCosine(x: number): [sine: number, cosine: number] {
  const quarter = Math.round(x * (2 / Math.PI));
  const r = x - quarter * HALF_PI_HIGH - quarter * HALF_PI_LOW;
  const q = r * r;
  let sine = 0;
  let cosine = 0;
  for (let k = 9; k > 0; k -= 1) {
    sine = (q * (1 - sine)) / (2 * k * (2 * k + 1));
    cosine = (q * (1 - cosine)) / (2 * k * (2 * k - 1));
  }
  sine = r - r * sine;
  cosine = 1 - cosine;
  switch (quarter & 3) {
    case 0:
      return [sine, cosine];
    case 1:
      return [cosine, -sine];
    case 2:
      return [-sine, -cosine];
    default:
      return [-cosine, sine];
  }
}

/** π/2 with its last 20 bits zero, so that small multiples are exact, and the rest. */
const HALF_PI_HIGH = 1.5707963267341256;
const HALF_PI_LOW = 6.077100506506192e-11;
