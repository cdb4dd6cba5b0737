/** Names and versions of what we store and send, and the inputs of the pad: for code that must not load the schemas. */
export const RUN_FORMAT = 'swaymark-run';
export const RUN_VERSION = 1;
export const EDIT_FORMAT = 'swaymark-edit';
export const EDIT_VERSION = 1;
export const INPUTS = ['touch', 'pen', 'mouse', 'key', 'assistive'] as const;
