/** A part of a sentence; `strong` parts are set in 600, `quiet` ones in the second ink. */
export interface SentencePart { text: string, strong?: boolean, quiet?: boolean }
