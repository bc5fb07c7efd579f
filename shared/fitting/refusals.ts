/** What is said with a fit, and in place of one. */

/** What a person should know of a fit; `code` is for programs and stays the same. */
export interface FitNote { code: string, message: string }
/** Why there is no fit. */
export interface FitRefusal { refused: FitNote }
/** A refusal from its code and its sentence. */
export const refusal = (code: string, message: string): FitRefusal => ({ refused: { code, message } })
