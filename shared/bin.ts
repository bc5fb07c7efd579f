/** The bin: what was put there can be taken out again for this long. */

/** After this an item counts as gone for everyone. Its rows stay for the audit trail and for the numbering of runs [d]. */
export const BIN_DAYS = 30
