/** What the application's role may do: read and write rows, never change tables; immutable rows only be added and read. */

/** Tables whose rows are written once. */
export const WRITTEN_ONCE = ['scenario_revisions', 'run_blocks', 'audit_events', 'uploads', 'fits', 'weigh_up_versions'] as const
/** Columns of a saved run that may change afterwards. */
export const RUN_COLUMNS_OPEN = ['audit_state', 'audit_blocks', 'audit_detection', 'audit_at', 'deleted_at', 'deleted_by'] as const

/** SQL that sets the rights anew; run after every migration, so that new tables are covered. */
export function grantsFor(role: string): string {
  if (!/^[a-z_][a-z0-9_]{0,62}$/.test(role)) throw new Error(`Role name not allowed: ${role}`)
  return `
    revoke all on all tables in schema public from "${role}";
    grant usage on schema public to "${role}";
    grant select, insert, update, delete on all tables in schema public to "${role}";
    ${WRITTEN_ONCE.map(table => `revoke update, delete on ${table} from "${role}";`).join('\n    ')}
    revoke update, delete on runs from "${role}";
    grant update (${RUN_COLUMNS_OPEN.join(', ')}) on runs to "${role}";
    revoke update, delete on recording_points from "${role}";
    grant update (aside) on recording_points to "${role}";`
}
