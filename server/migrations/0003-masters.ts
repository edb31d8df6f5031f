import type { Migration } from './migration.ts'

/** Machines, tooling, shells, products, control plans and balances: what a run is made of before it starts. */
export const up: Migration = async ({ run }) => {
  await run(`CREATE TABLE IF NOT EXISTS machines (
    id UUID NOT NULL PRIMARY KEY,
    site_id UUID NOT NULL,
    code VARCHAR(20) NOT NULL,
    name VARCHAR(120) NOT NULL,
    bores_per_group TINYINT UNSIGNED NOT NULL,
    disc_groups TINYINT UNSIGNED NOT NULL DEFAULT 6,
    segments TINYINT UNSIGNED NOT NULL,
    stations TINYINT UNSIGNED NOT NULL DEFAULT 5,
    indexes_per_minute DECIMAL(6,2) NOT NULL,
    scale_min_mm DECIMAL(7,3) NOT NULL,
    scale_max_mm DECIMAL(7,3) NOT NULL,
    deeper_is_higher BOOLEAN NOT NULL DEFAULT TRUE,
    is_active BOOLEAN NOT NULL DEFAULT TRUE,
    version INT UNSIGNED NOT NULL DEFAULT 1,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL,
    UNIQUE KEY machines_code (site_id, code),
    CONSTRAINT machines_geometry CHECK (bores_per_group BETWEEN 1 AND 60 AND disc_groups BETWEEN 1 AND 24 AND segments BETWEEN 1 AND 48 AND stations BETWEEN 1 AND 12),
    CONSTRAINT machines_speed CHECK (indexes_per_minute > 0),
    CONSTRAINT machines_scale CHECK (scale_min_mm < scale_max_mm),
    FOREIGN KEY (site_id) REFERENCES sites (id)
  )`)
  await run(`CREATE TABLE IF NOT EXISTS tooling_sets (
    id UUID NOT NULL PRIMARY KEY,
    site_id UUID NOT NULL,
    code VARCHAR(20) NOT NULL,
    capsule_size VARCHAR(6) NOT NULL,
    bores_per_group TINYINT UNSIGNED NOT NULL,
    disc_thickness_mm DECIMAL(6,3) NOT NULL,
    remarks VARCHAR(500) NOT NULL DEFAULT '',
    is_active BOOLEAN NOT NULL DEFAULT TRUE,
    version INT UNSIGNED NOT NULL DEFAULT 1,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL,
    UNIQUE KEY tooling_sets_code (site_id, code),
    CONSTRAINT tooling_sets_disc CHECK (disc_thickness_mm > 0),
    FOREIGN KEY (site_id) REFERENCES sites (id)
  )`)
  await run(`CREATE TABLE IF NOT EXISTS tooling_parts (
    id UUID NOT NULL PRIMARY KEY,
    tooling_set_id UUID NOT NULL,
    kind ENUM('dosing-disc','tamping-pins','transfer-pins','seal-ring','segments','bushes','springs','scraper') NOT NULL,
    serial VARCHAR(40) NOT NULL,
    station TINYINT UNSIGNED NULL,
    capsules_at_fitting BIGINT UNSIGNED NOT NULL DEFAULT 0,
    capsules_at_inspection BIGINT UNSIGNED NOT NULL DEFAULT 0,
    capsules_now BIGINT UNSIGNED NOT NULL DEFAULT 0,
    inspection_interval BIGINT UNSIGNED NULL,
    removed_at DATETIME(3) NULL,
    version INT UNSIGNED NOT NULL DEFAULT 1,
    UNIQUE KEY tooling_parts_serial (tooling_set_id, kind, serial),
    CONSTRAINT tooling_parts_count CHECK (capsules_now >= capsules_at_inspection),
    FOREIGN KEY (tooling_set_id) REFERENCES tooling_sets (id)
  )`)
  await run(`CREATE TABLE IF NOT EXISTS shell_lots (
    id UUID NOT NULL PRIMARY KEY,
    site_id UUID NOT NULL,
    code VARCHAR(30) NOT NULL,
    capsule_size VARCHAR(6) NOT NULL,
    material VARCHAR(60) NOT NULL,
    tare_version SMALLINT UNSIGNED NOT NULL DEFAULT 0,
    tare_n SMALLINT UNSIGNED NOT NULL DEFAULT 0,
    tare_mean_mg DECIMAL(9,4) NULL,
    tare_sd_mg DECIMAL(9,4) NULL,
    tare_weighed_at DATETIME(3) NULL,
    is_active BOOLEAN NOT NULL DEFAULT TRUE,
    version INT UNSIGNED NOT NULL DEFAULT 1,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL,
    UNIQUE KEY shell_lots_code (site_id, code),
    CONSTRAINT shell_lots_tare CHECK (tare_n = 0 OR (tare_mean_mg > 0 AND tare_sd_mg >= 0)),
    FOREIGN KEY (site_id) REFERENCES sites (id)
  )`)
  await run(`CREATE TABLE IF NOT EXISTS shell_weights (
    shell_lot_id UUID NOT NULL,
    tare_version SMALLINT UNSIGNED NOT NULL,
    ordinal SMALLINT UNSIGNED NOT NULL,
    weight_mg DECIMAL(9,3) NOT NULL,
    PRIMARY KEY (shell_lot_id, tare_version, ordinal),
    CONSTRAINT shell_weights_positive CHECK (weight_mg > 0),
    FOREIGN KEY (shell_lot_id) REFERENCES shell_lots (id)
  )`)
  await run(`CREATE TABLE IF NOT EXISTS products (
    id UUID NOT NULL PRIMARY KEY,
    site_id UUID NOT NULL,
    code VARCHAR(30) NOT NULL,
    name VARCHAR(120) NOT NULL,
    capsule_size VARCHAR(6) NOT NULL,
    target_fill_mg DECIMAL(9,3) NOT NULL,
    lower_specification_mg DECIMAL(9,3) NOT NULL,
    upper_specification_mg DECIMAL(9,3) NOT NULL,
    label_claims JSON NOT NULL,
    acceptance_standards JSON NOT NULL,
    is_active BOOLEAN NOT NULL DEFAULT TRUE,
    version INT UNSIGNED NOT NULL DEFAULT 1,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL,
    UNIQUE KEY products_code (site_id, code),
    CONSTRAINT products_limits CHECK (lower_specification_mg > 0 AND lower_specification_mg < target_fill_mg AND target_fill_mg < upper_specification_mg),
    FOREIGN KEY (site_id) REFERENCES sites (id)
  )`)
  await run(`CREATE TABLE IF NOT EXISTS control_plans (
    id UUID NOT NULL PRIMARY KEY,
    product_id UUID NOT NULL,
    plan_version SMALLINT UNSIGNED NOT NULL,
    state ENUM('proposed','approved','superseded','withdrawn') NOT NULL,
    basis ENUM('gross','net-mean-tare','net-individual') NOT NULL,
    sample_size SMALLINT UNSIGNED NOT NULL,
    start_up_sample_size SMALLINT UNSIGNED NOT NULL,
    interval_minutes SMALLINT UNSIGNED NOT NULL,
    chart ENUM('xbar-r','xbar-s','individuals') NOT NULL,
    run_tests JSON NOT NULL,
    mean_alert_percent DECIMAL(6,3) NOT NULL,
    mean_action_percent DECIMAL(6,3) NOT NULL,
    individual_alert_percent DECIMAL(6,3) NOT NULL,
    individual_action_percent DECIMAL(6,3) NOT NULL,
    rsd_alert_percent DECIMAL(6,3) NOT NULL,
    rsd_action_percent DECIMAL(6,3) NOT NULL,
    reaction_steps JSON NOT NULL,
    statistical_ground VARCHAR(1000) NOT NULL,
    proposed_by_id UUID NOT NULL,
    approved_by_id UUID NULL,
    approved_at DATETIME(3) NULL,
    version INT UNSIGNED NOT NULL DEFAULT 1,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL,
    UNIQUE KEY control_plans_version (product_id, plan_version),
    CONSTRAINT control_plans_limits CHECK (
      0 < mean_alert_percent AND mean_alert_percent <= mean_action_percent
      AND 0 < individual_alert_percent AND individual_alert_percent <= individual_action_percent
      AND 0 < rsd_alert_percent AND rsd_alert_percent <= rsd_action_percent),
    CONSTRAINT control_plans_sample CHECK (sample_size BETWEEN 1 AND 1000 AND start_up_sample_size BETWEEN 1 AND 1000 AND interval_minutes BETWEEN 1 AND 1440),
    CONSTRAINT control_plans_two_people CHECK (approved_by_id IS NULL OR approved_by_id <> proposed_by_id),
    FOREIGN KEY (product_id) REFERENCES products (id),
    FOREIGN KEY (proposed_by_id) REFERENCES users (id),
    FOREIGN KEY (approved_by_id) REFERENCES users (id)
  )`)
  await run(`CREATE TABLE IF NOT EXISTS balances (
    id UUID NOT NULL PRIMARY KEY,
    site_id UUID NOT NULL,
    code VARCHAR(20) NOT NULL,
    description VARCHAR(200) NOT NULL,
    readability_mg DECIMAL(9,4) NOT NULL,
    repeatability_sd_mg DECIMAL(9,4) NOT NULL,
    capacity_mg DECIMAL(12,3) NOT NULL,
    safety_factor DECIMAL(5,2) NOT NULL DEFAULT 1,
    calibration_due_on DATE NOT NULL,
    state ENUM('in-use','out-of-use') NOT NULL DEFAULT 'in-use',
    file_mapping JSON NULL,
    version INT UNSIGNED NOT NULL DEFAULT 1,
    created_at DATETIME(3) NOT NULL,
    updated_at DATETIME(3) NOT NULL,
    UNIQUE KEY balances_code (site_id, code),
    CONSTRAINT balances_figures CHECK (readability_mg > 0 AND repeatability_sd_mg >= 0 AND capacity_mg > 0 AND safety_factor >= 1),
    FOREIGN KEY (site_id) REFERENCES sites (id)
  )`)
  await run(`CREATE TABLE IF NOT EXISTS balance_checks (
    id UUID NOT NULL PRIMARY KEY,
    balance_id UUID NOT NULL,
    kind ENUM('daily','calibration','repeatability') NOT NULL,
    reference_weight VARCHAR(60) NOT NULL DEFAULT '',
    checked_at DATETIME(3) NOT NULL,
    checked_by_id UUID NOT NULL,
    nominal_mg DECIMAL(12,4) NOT NULL,
    reading_mg DECIMAL(12,4) NOT NULL,
    tolerance_mg DECIMAL(12,4) NOT NULL,
    has_passed BOOLEAN NOT NULL,
    remarks VARCHAR(500) NOT NULL DEFAULT '',
    KEY balance_checks_latest (balance_id, checked_at),
    CONSTRAINT balance_checks_figures CHECK (nominal_mg > 0 AND tolerance_mg > 0),
    FOREIGN KEY (balance_id) REFERENCES balances (id),
    FOREIGN KEY (checked_by_id) REFERENCES users (id)
  )`)
}
