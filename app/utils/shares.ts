/** Two shares that sum to one. */

/** What is left of one, without the last binary digits (1 − 0.83 is 0.17). */
export const complement = (share: number) => Number((1 - share).toFixed(12))
