/** What a migration may do: run one statement after the other with the rights of the migrating account. */
export interface MigrationContext {
  run(sql: string): Promise<void>
}

/** Migrations go forward only; once merged a file is never changed. */
export type Migration = (context: MigrationContext) => Promise<void>
