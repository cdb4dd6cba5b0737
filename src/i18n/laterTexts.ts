import { byName } from './texts';

/** Every message file the pad can do without, in one chunk. */
export const laterTexts = byName(
  import.meta.glob(['./en/*.json', '!./en/common.json', '!./en/errors.json', '!./en/kit.json', '!./en/pad.json'], {
    eager: true,
  }),
);
