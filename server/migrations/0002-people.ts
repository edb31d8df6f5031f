import type { Migration } from './migration.ts'

/** Sites, the people who work there, their roles by site, and their sessions. */
export const up: Migration = async ({ run }) => {
  await run(`CREATE TABLE IF NOT EXISTS sites (
    id UUID NOT NULL PRIMARY KEY,
    code VARCHAR(12) NOT NULL UNIQUE,
    name VARCHAR(120) NOT NULL,
    time_zone VARCHAR(60) NOT NULL,
    version INT UNSIGNED NOT NULL DEFAULT 1,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL
  )`)
  await run(`CREATE TABLE IF NOT EXISTS users (
    id UUID NOT NULL PRIMARY KEY,
    email VARCHAR(200) NOT NULL UNIQUE,
    name VARCHAR(120) NOT NULL,
    pass_phrase_hash VARCHAR(200) NOT NULL,
    must_change_pass_phrase BOOLEAN NOT NULL DEFAULT FALSE,
    signature_accepted_at DATETIME(3) NULL,
    is_active BOOLEAN NOT NULL DEFAULT TRUE,
    version INT UNSIGNED NOT NULL DEFAULT 1,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL
  )`)
  await run(`CREATE TABLE IF NOT EXISTS user_roles (
    user_id UUID NOT NULL,
    site_id UUID NOT NULL,
    role ENUM('operator','fitter','engineer','qa','viewer','administrator') NOT NULL,
    PRIMARY KEY (user_id, site_id, role),
    FOREIGN KEY (user_id) REFERENCES users (id),
    FOREIGN KEY (site_id) REFERENCES sites (id)
  )`)
  await run(`CREATE TABLE IF NOT EXISTS sessions (
    id UUID NOT NULL PRIMARY KEY,
    user_id UUID NOT NULL,
    refresh_hash CHAR(64) CHARACTER SET ascii NOT NULL,
    previous_refresh_hash CHAR(64) CHARACTER SET ascii NULL,
    rotated_at DATETIME(3) NOT NULL,
    started_at DATETIME(3) NOT NULL,
    last_used_at DATETIME(3) NOT NULL,
    expires_at DATETIME(3) NOT NULL,
    ended_at DATETIME(3) NULL,
    end_reason VARCHAR(40) NULL,
    address VARCHAR(60) NOT NULL,
    device VARCHAR(200) NOT NULL,
    signed_at DATETIME(3) NULL,
    KEY sessions_user (user_id, ended_at),
    FOREIGN KEY (user_id) REFERENCES users (id)
  )`)
  await run(`CREATE TABLE IF NOT EXISTS sign_in_throttles (
    subject CHAR(64) CHARACTER SET ascii NOT NULL PRIMARY KEY,
    failures INT UNSIGNED NOT NULL,
    last_failure_at DATETIME(3) NOT NULL,
    blocked_until DATETIME(3) NULL
  )`)
}
