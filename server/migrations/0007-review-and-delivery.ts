import type { Migration } from './migration.ts'

/** The weekly review, mail on its way out, live events, and the memory of requests already answered. */
export const up: Migration = async ({ run }) => {
  await run(`CREATE TABLE IF NOT EXISTS reviews (
    id UUID NOT NULL PRIMARY KEY,
    site_id UUID NOT NULL,
    week CHAR(8) NOT NULL,
    figures JSON NOT NULL,
    frozen_at DATETIME(3) NOT NULL,
    frozen_by_id UUID NOT NULL,
    UNIQUE KEY reviews_week (site_id, week),
    FOREIGN KEY (site_id) REFERENCES sites (id),
    FOREIGN KEY (frozen_by_id) REFERENCES users (id)
  )`)
  await run(`CREATE TABLE IF NOT EXISTS review_actions (
    id UUID NOT NULL PRIMARY KEY,
    site_id UUID NOT NULL,
    week CHAR(8) NOT NULL,
    title VARCHAR(300) NOT NULL,
    owner VARCHAR(120) NOT NULL,
    due_on DATE NOT NULL,
    state ENUM('open','done','dropped') NOT NULL DEFAULT 'open',
    effect VARCHAR(1000) NULL,
    created_by_id UUID NOT NULL,
    closed_at DATETIME(3) NULL,
    version INT UNSIGNED NOT NULL DEFAULT 1,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL,
    KEY review_actions_open (site_id, state, due_on),
    CONSTRAINT review_actions_effect CHECK (state = 'open' OR effect IS NOT NULL),
    FOREIGN KEY (site_id) REFERENCES sites (id),
    FOREIGN KEY (created_by_id) REFERENCES users (id)
  )`)
  await run(`CREATE TABLE IF NOT EXISTS outbox_mails (
    id UUID NOT NULL PRIMARY KEY,
    site_id UUID NOT NULL,
    recipients JSON NOT NULL,
    subject VARCHAR(200) NOT NULL,
    text LONGTEXT NOT NULL,
    state ENUM('waiting','claimed','sent','failed') NOT NULL DEFAULT 'waiting',
    attempts SMALLINT UNSIGNED NOT NULL DEFAULT 0,
    next_attempt_at DATETIME(3) NOT NULL,
    claimed_by VARCHAR(60) NULL,
    claimed_at DATETIME(3) NULL,
    message_id VARCHAR(200) NOT NULL UNIQUE,
    last_problem VARCHAR(500) NULL,
    sent_at DATETIME(3) NULL,
    signal_id UUID NULL,
    created_at DATETIME(3) NOT NULL,
    KEY outbox_mails_waiting (state, next_attempt_at),
    FOREIGN KEY (site_id) REFERENCES sites (id),
    FOREIGN KEY (signal_id) REFERENCES signals (id)
  )`)
  await run(`CREATE TABLE IF NOT EXISTS events (
    id BIGINT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    site_id UUID NOT NULL,
    kind VARCHAR(40) NOT NULL,
    subject_id UUID NOT NULL,
    batch_id UUID NULL,
    created_at DATETIME(3) NOT NULL,
    KEY events_created (created_at),
    FOREIGN KEY (site_id) REFERENCES sites (id)
  )`)
  await run(`CREATE TABLE IF NOT EXISTS idempotency_keys (
    user_id UUID NOT NULL,
    route VARCHAR(120) NOT NULL,
    idempotency_key VARCHAR(80) NOT NULL,
    body_hash CHAR(64) CHARACTER SET ascii NOT NULL,
    answer JSON NULL,
    created_at DATETIME(3) NOT NULL,
    PRIMARY KEY (user_id, route, idempotency_key),
    KEY idempotency_keys_age (created_at),
    FOREIGN KEY (user_id) REFERENCES users (id)
  )`)
}
