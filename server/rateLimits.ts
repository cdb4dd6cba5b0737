/**
 * How often something may be tried. A school is one address, so whoever names an account is held back
 * by that account, and an address alone only where none is named. Good tries are not counted.
 */
export interface RateLimits {
  windowMs: number;
  /** Wrong PINs for one student, or wrong passwords for one account from one address, per window. */
  failedPerAccount: number;
  /** Wrong passwords for one account from anywhere, per window: so high that no stranger shuts the owner out alone. */
  failedPerAccountAnywhere: number;
  /** Wrong class codes and links from one address, per window. */
  failedPerAddress: number;
  /** Tries of all these kinds from one address that wait for their answer at one moment. */
  triesAtOnce: number;
  /** People who join one class from one address, per window. */
  joinsPerClass: number;
  /** Reset mails asked for one e-mail address, per window. */
  resetsPerAccount: number;
  /** Requests of any kind under one sign-in, per minute. */
  requestsPerSignIn: number;
  /** Requests of any kind from one address with no sign-in, per minute. */
  requestsPerAddress: number;
}

/** Common practice, no source. A class of 40 comes in within a minute, a year of 130 at one bell. */
export const RATE_LIMITS: RateLimits = {
  windowMs: 15 * 60_000,
  failedPerAccount: 10,
  failedPerAccountAnywhere: 100,
  failedPerAddress: 100,
  triesAtOnce: 300,
  joinsPerClass: 150,
  resetsPerAccount: 5,
  requestsPerSignIn: 300,
  requestsPerAddress: 6_000,
};
