/**
 * Published approximations to T/T0, for comparison only: the product uses none of them. Amplitudes in rad.
 * Keys are those of tests/reference/series-and-approximations.json, where the sources stand too.
 */
type Approximation = (amplitude: number) => number;

/** Coefficients of A⁰, A², A⁴ …: OEIS A223067/A223068. */
const EVEN = [1, 1 / 16, 11 / 3072, 173 / 737_280, 22_931 / 1_321_205_760, 1_319_183 / 951_268_147_200];

const toPower =
  (highest: number): Approximation =>
  (amplitude) =>
    EVEN.slice(0, highest / 2 + 1).reduce((sum, c, n) => sum + c * amplitude ** (2 * n), 0);

const arithmeticMean =
  (steps: number): Approximation =>
  (amplitude) => {
    let [a, b] = [1, Math.cos(amplitude / 2)];
    for (let i = 0; i < steps; i += 1) [a, b] = [(a + b) / 2, Math.sqrt(a * b)];
    return 1 / a;
  };

const cosine = (amplitude: number) => Math.cos(amplitude / 2);
const lima: Approximation = (amplitude) => -Math.log(cosine(amplitude)) / (1 - cosine(amplitude));
const cromer: Approximation = (amplitude) => (2 / Math.PI) * Math.log(4 / cosine(amplitude));

export const PERIOD_APPROXIMATIONS: Record<string, Approximation> = {
  small_angle: () => 1,
  bernoulli_1749: toPower(2),
  series_4: toPower(4),
  series_6: toPower(6),
  series_8: toPower(8),
  series_10: toPower(10),
  sin2_first: (a) => 1 + Math.sin(a / 2) ** 2 / 4,
  sin2_second: (a) => 1 + Math.sin(a / 2) ** 2 / 4 + (9 / 64) * Math.sin(a / 2) ** 4,
  denman_1959: (a) => 1 / (1 - a ** 2 / 16),
  one_over_sqrt_1_minus_A2_over_8: (a) => (1 - a ** 2 / 8) ** -0.5,
  molina_1997: (a) => (Math.sin(a) / a) ** (-3 / 8),
  kidd_fogg_2002: (a) => cosine(a) ** -0.5,
  ganley_1985_parwani_2004: (a) => {
    const x = (Math.sqrt(3) * a) / 2;
    return (Math.sin(x) / x) ** -0.5;
  },
  lima_arun_2006: lima,
  carvalhaes_suppes_2008_a1: arithmeticMean(1),
  carvalhaes_suppes_2008_a2: arithmeticMean(2),
  agm_a3: arithmeticMean(3),
  agm_g2: (a) => 1 / Math.sqrt(((1 + cosine(a)) / 2) * Math.sqrt(cosine(a))),
  cromer_1995: cromer,
  lima_2008_weighted: (a) => {
    const [near, far] = [7.17 * cosine(a) ** 2, Math.sin(a / 2) ** 2];
    return (near * lima(a) + far * cromer(a)) / (near + far);
  },
};
