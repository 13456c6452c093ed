import type { Sql } from './sql.ts';

/** The rows of one workspace. The only way from a WorkspaceStore to the tables. */
export interface Scope {
  readonly teamId: string;
  /** `$1` is always the team id; `params` begin at `$2` */
  query<Row>(text: string, params?: readonly unknown[]): Promise<readonly Row[]>;
}

/**
 * Binds every statement to one workspace.
 * Each statement must use `$1` as the team id, either to narrow (`team_id = $1`) or as the first value written;
 * one that does not is refused before it reaches the database, so forgetting it cannot show another workspace's rows.
 */
export function scopeOf(sql: Sql, teamId: string): Scope {
  return {
    teamId,
    async query<Row>(text: string, params: readonly unknown[] = []) {
      if (!/\bteam_id = \$1(?!\d)/.test(text) && !/\(team_id\b[^)]*\)\s*VALUES \(\$1(?!\d)/.test(text)) {
        throw new Error(`a statement on a workspace's rows must be bound to its team: ${text}`);
      }
      return sql.query<Row>(text, [teamId, ...params]);
    },
  };
}
