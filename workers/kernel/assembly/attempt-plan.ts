// What the attempt sampler reads: tables and arrivals of each vesicle class, and its working memory.

/** One vesicle class. Written by the host word by word, in this order. */
@unmanaged
export class AttemptClass {
  /** u32 rows [start class][waitSteps + 3]. */
  waits: usize
  waitSteps: i32
  /** u8 [step] for steps up to landingSteps; later steps fall in the last bin. */
  binOf: usize
  landingSteps: i32
  /** {offset in cells u32, length u32} [start class][bin·2 + parity]. */
  rows: usize
  rowsPerClass: i32
  cells: usize
  /** u16 [start class][rank]: sites in order of distance from the class's representative. */
  order: usize
  /** u16 [site], u8 [site], u16 [mirror][site]. */
  classOf: usize
  mirrorOf: usize
  mirrors: usize
  /** u16 [start class][8] sites of a class, u16 [start class] how many. */
  members: usize
  memberCounts: usize
  /** Rows of base-256 digits of the late wait, counted in pairs of steps. */
  lateDigits: usize
  lateDigitCount: i32
  /** Number of vesicles that ever attempt: a CountTable. */
  counts: usize
  /** Row over [start class][early, even, tail even, tail odd]. */
  kinds: usize
  kindCount: i32
  /** u32 rows [start class][earlySteps]. */
  early: usize
  earlySteps: i32
  /** Row over blocks of 256 pairs of steps. */
  tailBlocks: usize
  tailBlockCount: i32
  /** Per site the addresses {waiting row, landing rows, order, mirror} that its class and mirror lead to. */
  starts: usize
}

/** Written by the host word by word, in this order. */
@unmanaged
export class Attempt {
  class0: usize
  class1: usize
  /** i32 [steps] first of each step's list: attempts, vesicles that become ready, vesicles that let go (0 where unused). */
  attempts: usize
  ripenings: usize
  detachments: usize
  /** {next i32, code u32} per vesicle: site, and 0x10000 for the second vesicle class. */
  vesicles: usize
  capacity: i32
  /** i32 [site] vesicle that sits there, or −1. */
  sitters: usize
  /** f64 [vesicle class][site] chance that an effective attempt attaches, times 2^32. */
  accepts: usize
  /** f64 [steps] factor, f64 [steps + 1] sum of floor(65536·factor) before each step; 0 without decline. */
  factors: usize
  declinedBefore: usize
  /** u32 [256] draws made ahead. */
  draws: usize
  /** Rows of base-256 digits [site class][3][256] of the steps until letting go and until ready. */
  detachDigits: usize
  readyDigits: usize
  /** i32 per vesicle: the step at which it lets go of its site; 0 where none ever does. */
  leaving: usize
}
