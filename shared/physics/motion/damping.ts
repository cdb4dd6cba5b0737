/**
 * The three ways a pendulum loses its swing, as pure numbers: with time in units of 1/ω0,
 * θ″ = −sin θ − 2 viscous θ′ − quadratic θ′|θ′| − dry sgn θ′. None is negative.
 */
export interface Damping {
  /** γ/ω0. In 1/s it is viscous × 2π/T0. */
  viscous: number;
  /** β, drag as the square of the speed. */
  quadratic: number;
  /** c, constant friction as a share of the weight's moment. */
  dry: number;
}
