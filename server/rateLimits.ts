/** How often something may be tried. Only tries that failed are counted, so a whole class behind one address gets in. */
export interface RateLimits {
  windowMs: number;
  /** Wrong passwords or PINs for one account, per window. */
  failedPerAccount: number;
  /** Wrong passwords, PINs, class codes or links from one address, per window. */
  failedPerAddress: number;
  /** Reset mails asked for one e-mail address, per window. */
  resetsPerAccount: number;
  /** Requests of any kind from one address, per minute. */
  requestsPerMinute: number;
}

/** Common practice, no source. A school is one address: 40 benches that poll must fit. */
export const RATE_LIMITS: RateLimits = {
  windowMs: 15 * 60_000,
  failedPerAccount: 10,
  failedPerAddress: 100,
  resetsPerAccount: 5,
  requestsPerMinute: 6_000,
};
