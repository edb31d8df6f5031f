import type { Migration } from './migration.ts'

/** What was not normal, who reacted, and the quality unit's decision with its signature. */
export const up: Migration = async ({ run }) => {
  await run(`CREATE TABLE IF NOT EXISTS signals (
    id UUID NOT NULL PRIMARY KEY,
    batch_id UUID NOT NULL,
    sample_id UUID NOT NULL,
    severity ENUM('alert','action') NOT NULL,
    sources JSON NOT NULL,
    sentence VARCHAR(1000) NOT NULL,
    state ENUM('active','acknowledged','returned','closed') NOT NULL DEFAULT 'active',
    raised_at DATETIME(3) NOT NULL,
    acknowledged_by_id UUID NULL,
    acknowledged_at DATETIME(3) NULL,
    cause VARCHAR(200) NULL,
    reaction VARCHAR(2000) NULL,
    closed_by_id UUID NULL,
    closed_at DATETIME(3) NULL,
    version INT UNSIGNED NOT NULL DEFAULT 1,
    UNIQUE KEY signals_sample (sample_id),
    KEY signals_batch (batch_id, raised_at),
    CONSTRAINT signals_closed CHECK (state <> 'closed' OR (cause IS NOT NULL AND reaction IS NOT NULL AND closed_by_id IS NOT NULL)),
    FOREIGN KEY (batch_id) REFERENCES batches (id),
    FOREIGN KEY (sample_id) REFERENCES samples (id),
    FOREIGN KEY (acknowledged_by_id) REFERENCES users (id),
    FOREIGN KEY (closed_by_id) REFERENCES users (id)
  )`)
  await run(`CREATE TABLE IF NOT EXISTS deviations (
    id UUID NOT NULL PRIMARY KEY,
    site_id UUID NOT NULL,
    batch_id UUID NOT NULL,
    number VARCHAR(30) NOT NULL,
    title VARCHAR(200) NOT NULL,
    description VARCHAR(4000) NOT NULL,
    cause VARCHAR(2000) NULL,
    effect_on_quality VARCHAR(2000) NULL,
    correction VARCHAR(2000) NULL,
    material_outcome VARCHAR(2000) NULL,
    state ENUM('open','closed') NOT NULL DEFAULT 'open',
    opened_by_id UUID NOT NULL,
    opened_at DATETIME(3) NOT NULL,
    closed_by_id UUID NULL,
    closed_at DATETIME(3) NULL,
    version INT UNSIGNED NOT NULL DEFAULT 1,
    UNIQUE KEY deviations_number (site_id, number),
    KEY deviations_batch (batch_id, state),
    CONSTRAINT deviations_closed CHECK (state <> 'closed' OR (cause IS NOT NULL AND effect_on_quality IS NOT NULL AND correction IS NOT NULL AND material_outcome IS NOT NULL AND closed_by_id IS NOT NULL)),
    FOREIGN KEY (site_id) REFERENCES sites (id),
    FOREIGN KEY (batch_id) REFERENCES batches (id),
    FOREIGN KEY (opened_by_id) REFERENCES users (id),
    FOREIGN KEY (closed_by_id) REFERENCES users (id)
  )`)
  await run(`CREATE TABLE IF NOT EXISTS signatures (
    id UUID NOT NULL PRIMARY KEY,
    site_id UUID NOT NULL,
    user_id UUID NOT NULL,
    printed_name VARCHAR(120) NOT NULL,
    meaning VARCHAR(60) NOT NULL,
    reason VARCHAR(2000) NOT NULL DEFAULT '',
    record_kind VARCHAR(40) NOT NULL,
    record_id UUID NOT NULL,
    content_hash CHAR(64) CHARACTER SET ascii NOT NULL,
    signed_at DATETIME(3) NOT NULL,
    session_id UUID NOT NULL,
    KEY signatures_record (record_kind, record_id, signed_at),
    FOREIGN KEY (site_id) REFERENCES sites (id),
    FOREIGN KEY (user_id) REFERENCES users (id),
    FOREIGN KEY (session_id) REFERENCES sessions (id)
  )`)
  await run(`CREATE TABLE IF NOT EXISTS dispositions (
    id UUID NOT NULL PRIMARY KEY,
    batch_id UUID NOT NULL,
    sequence SMALLINT UNSIGNED NOT NULL,
    decision ENUM('release','hold','reject') NOT NULL,
    reason VARCHAR(2000) NOT NULL,
    content_hash CHAR(64) CHARACTER SET ascii NOT NULL,
    record JSON NOT NULL,
    signature_id UUID NOT NULL,
    decided_by_id UUID NOT NULL,
    decided_at DATETIME(3) NOT NULL,
    UNIQUE KEY dispositions_sequence (batch_id, sequence),
    FOREIGN KEY (batch_id) REFERENCES batches (id),
    FOREIGN KEY (signature_id) REFERENCES signatures (id),
    FOREIGN KEY (decided_by_id) REFERENCES users (id)
  )`)
}
