/** Version of the kernel: raised by every change that moves a number (order of draws, tables, rounding). Stored with each run. */
export const KERNEL_VERSION = '1.0.0'
