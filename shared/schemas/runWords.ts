/**
 * The fixed words of the run format, apart from its schema: the tap pad seals runs with them and must not
 * have to load zod.
 */

export const RUN_FORMAT = 'swaymark-run';
export const RUN_VERSION = 1;
export const INPUTS = ['touch', 'pen', 'mouse', 'key', 'assistive'] as const;
export type TapInput = (typeof INPUTS)[number];
