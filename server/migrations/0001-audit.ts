import type { Migration } from './migration.ts'

/** The audit trail: one chain a record family or batch, each entry sealed by the hash of the one before. */
export const up: Migration = async ({ run }) => {
  await run(`CREATE TABLE IF NOT EXISTS audit_chains (
    chain VARCHAR(80) NOT NULL PRIMARY KEY,
    sequence INT UNSIGNED NOT NULL,
    hash CHAR(64) CHARACTER SET ascii NOT NULL
  )`)
  await run(`CREATE TABLE IF NOT EXISTS audit_entries (
    chain VARCHAR(80) NOT NULL,
    sequence INT UNSIGNED NOT NULL,
    at DATETIME(3) NOT NULL,
    actor_id UUID NULL,
    actor_name VARCHAR(120) NOT NULL,
    action VARCHAR(60) NOT NULL,
    record_kind VARCHAR(40) NOT NULL,
    record_id VARCHAR(80) NOT NULL,
    old_values JSON NULL,
    new_values JSON NULL,
    reason VARCHAR(1000) NULL,
    terminal VARCHAR(200) NOT NULL,
    request_id VARCHAR(64) NOT NULL,
    hash CHAR(64) CHARACTER SET ascii NOT NULL,
    PRIMARY KEY (chain, sequence),
    KEY audit_entries_record (record_kind, record_id),
    KEY audit_entries_at (at)
  )`)
}
