/** Version of fits and weigh-ups: raised by every change that can move a digit of theirs, so that a kept one says by which it was made. */
export const FITTING_VERSION = '1.0.0'
