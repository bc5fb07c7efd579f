/** What `expect --json` prints. */

export interface Preview { tauS: number | null, filled: number[], method: 'exact-linear' | 'walk-preview', replicates: number | null }
export interface Expectation {
  timesS: number[]
  closedForm: { tauS: number | null, filled: number[], components: { name: string, sites: number, tauS: number | null }[] }
  preview: Preview | null
  reason?: string
}
