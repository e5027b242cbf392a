import type { MigrationInterface, QueryRunner } from 'typeorm';

const ID = 'CHAR(36) CHARACTER SET ascii COLLATE ascii_bin';
const AT = 'DATETIME(3)';

/** MariaDB commits each statement by itself, so every step is written to be run again after a stop half way. */
export class FirstTables1764547200000 implements MigrationInterface {
  readonly name = 'FirstTables1764547200000';

  async up(runner: QueryRunner): Promise<void> {
    for (const statement of TABLES) await runner.query(statement);
  }

  async down(runner: QueryRunner): Promise<void> {
    for (const table of TABLE_NAMES) await runner.query(`DROP TABLE IF EXISTS \`${table}\``);
  }
}

const TABLES = [
  `CREATE TABLE IF NOT EXISTS person (
    id ${ID} NOT NULL PRIMARY KEY, email VARCHAR(200) NOT NULL, name VARCHAR(80) NOT NULL, password_hash VARCHAR(200) NULL,
    owner TINYINT NOT NULL DEFAULT 0, disabled TINYINT NOT NULL DEFAULT 0, token_version INT NOT NULL DEFAULT 1,
    last_seen_at ${AT} NULL, created_at ${AT} NOT NULL, version INT NOT NULL DEFAULT 1, UNIQUE KEY person_email (email))`,
  `CREATE TABLE IF NOT EXISTS studio (
    id ${ID} NOT NULL PRIMARY KEY, name VARCHAR(80) NOT NULL, time_zone VARCHAR(60) NOT NULL, unit CHAR(1) NOT NULL, address VARCHAR(200) NOT NULL,
    pressure_hpa DOUBLE NOT NULL, quiet_from SMALLINT NULL, quiet_to SMALLINT NULL, recipients LONGTEXT NOT NULL, escalate_after_minutes INT NOT NULL,
    position INT NOT NULL DEFAULT 0, version INT NOT NULL DEFAULT 1)`,
  `CREATE TABLE IF NOT EXISTS membership (
    person_id ${ID} NOT NULL, studio_id ${ID} NOT NULL, role VARCHAR(10) NOT NULL, PRIMARY KEY (person_id, studio_id),
    CONSTRAINT membership_person FOREIGN KEY (person_id) REFERENCES person (id), CONSTRAINT membership_studio FOREIGN KEY (studio_id) REFERENCES studio (id))`,
  `CREATE TABLE IF NOT EXISTS session (
    id ${ID} NOT NULL PRIMARY KEY, person_id ${ID} NOT NULL, user_agent VARCHAR(300) NOT NULL, address VARCHAR(60) NOT NULL,
    created_at ${AT} NOT NULL, last_used_at ${AT} NOT NULL, ended_at ${AT} NULL, ended_because VARCHAR(40) NULL, KEY session_person (person_id),
    CONSTRAINT session_person FOREIGN KEY (person_id) REFERENCES person (id))`,
  `CREATE TABLE IF NOT EXISTS refresh_token (
    token_hash CHAR(64) CHARACTER SET ascii COLLATE ascii_bin NOT NULL PRIMARY KEY, session_id ${ID} NOT NULL, created_at ${AT} NOT NULL, expires_at ${AT} NOT NULL,
    used_at ${AT} NULL, KEY refresh_session (session_id), CONSTRAINT refresh_session FOREIGN KEY (session_id) REFERENCES session (id))`,
  `CREATE TABLE IF NOT EXISTS mailed_link (
    token_hash CHAR(64) CHARACTER SET ascii COLLATE ascii_bin NOT NULL PRIMARY KEY, kind VARCHAR(20) NOT NULL, person_id ${ID} NOT NULL, created_by ${ID} NULL,
    created_at ${AT} NOT NULL, expires_at ${AT} NOT NULL, used_at ${AT} NULL, KEY link_person (person_id),
    CONSTRAINT link_person FOREIGN KEY (person_id) REFERENCES person (id))`,
  `CREATE TABLE IF NOT EXISTS room (
    id ${ID} NOT NULL PRIMARY KEY, studio_id ${ID} NOT NULL, name VARCHAR(80) NOT NULL, position INT NOT NULL DEFAULT 0, band_low DOUBLE NOT NULL, band_high DOUBLE NOT NULL,
    heat_limit DOUBLE NULL, humidity_high DOUBLE NOT NULL, swing_limit DOUBLE NOT NULL, slip_days DOUBLE NOT NULL, notes TEXT NOT NULL, rules LONGTEXT NULL,
    version INT NOT NULL DEFAULT 1, KEY room_studio (studio_id), CONSTRAINT room_studio FOREIGN KEY (studio_id) REFERENCES studio (id))`,
  `CREATE TABLE IF NOT EXISTS rack (
    id ${ID} NOT NULL PRIMARY KEY, studio_id ${ID} NOT NULL, room_id ${ID} NOT NULL, name VARCHAR(80) NOT NULL, position INT NOT NULL DEFAULT 0, version INT NOT NULL DEFAULT 1,
    KEY rack_room (room_id), KEY rack_studio (studio_id), CONSTRAINT rack_room FOREIGN KEY (room_id) REFERENCES room (id))`,
  `CREATE TABLE IF NOT EXISTS shelf (
    id ${ID} NOT NULL PRIMARY KEY, rack_id ${ID} NOT NULL, position INT NOT NULL, capacity INT NOT NULL, KEY shelf_rack (rack_id),
    CONSTRAINT shelf_rack FOREIGN KEY (rack_id) REFERENCES rack (id))`,
  `CREATE TABLE IF NOT EXISTS sensor (
    no INT UNSIGNED NOT NULL AUTO_INCREMENT, id ${ID} NOT NULL, studio_id ${ID} NOT NULL, room_id ${ID} NOT NULL, name VARCHAR(80) NOT NULL,
    device_id VARCHAR(40) CHARACTER SET ascii COLLATE ascii_bin NOT NULL, secret_hash CHAR(64) CHARACTER SET ascii COLLATE ascii_bin NOT NULL, trusted TINYINT NOT NULL DEFAULT 1,
    offset_celsius DOUBLE NOT NULL DEFAULT 0, offset_humidity DOUBLE NOT NULL DEFAULT 0, interval_seconds INT NOT NULL DEFAULT 60, accept_late_days INT NOT NULL DEFAULT 7,
    battery DOUBLE NULL, last_heard_at ${AT} NULL, future_readings BIGINT NOT NULL DEFAULT 0, conflicts BIGINT NOT NULL DEFAULT 0, quarantined BIGINT NOT NULL DEFAULT 0,
    retired_at ${AT} NULL, version INT NOT NULL DEFAULT 1, PRIMARY KEY (no), UNIQUE KEY sensor_id (id), UNIQUE KEY sensor_device (device_id), KEY sensor_room (room_id), KEY sensor_studio (studio_id),
    CONSTRAINT sensor_room FOREIGN KEY (room_id) REFERENCES room (id))`,
  `CREATE TABLE IF NOT EXISTS reading (
    sensor_no INT UNSIGNED NOT NULL, at ${AT} NOT NULL, received_at ${AT} NOT NULL, t_micro INT NOT NULL, rh_micro INT NULL, flags TINYINT UNSIGNED NOT NULL DEFAULT 0,
    PRIMARY KEY (sensor_no, at)) PARTITION BY RANGE COLUMNS (at) (PARTITION p_rest VALUES LESS THAN (MAXVALUE))`,
  `CREATE TABLE IF NOT EXISTS sequence_seen (
    sensor_no INT UNSIGNED NOT NULL, boot BIGINT UNSIGNED NOT NULL, seq BIGINT UNSIGNED NOT NULL, at ${AT} NOT NULL, PRIMARY KEY (sensor_no, boot, seq))`,
  `CREATE TABLE IF NOT EXISTS dirty_mark (sensor_no INT UNSIGNED NOT NULL, bucket DATETIME NOT NULL, PRIMARY KEY (sensor_no, bucket))`,
  `CREATE TABLE IF NOT EXISTS rollup (
    sensor_no INT UNSIGNED NOT NULL, level SMALLINT UNSIGNED NOT NULL, bucket DATETIME NOT NULL, n INT UNSIGNED NOT NULL, t_sum BIGINT NOT NULL, t_min INT NOT NULL, t_max INT NOT NULL,
    rh_n INT UNSIGNED NOT NULL, rh_sum BIGINT NOT NULL, rh_min INT NULL, rh_max INT NULL, PRIMARY KEY (sensor_no, level, bucket))`,
  `CREATE TABLE IF NOT EXISTS quarantine (
    id BIGINT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY, received_at ${AT} NOT NULL, studio_id ${ID} NULL, sensor_id ${ID} NULL, topic VARCHAR(300) NOT NULL,
    payload VARBINARY(2048) NOT NULL, reason VARCHAR(300) NOT NULL, KEY quarantine_studio (studio_id, id))`,
  `CREATE TABLE IF NOT EXISTS wax (
    id ${ID} NOT NULL PRIMARY KEY, name VARCHAR(80) NOT NULL, family VARCHAR(30) NOT NULL, kinetics LONGTEXT NOT NULL, pour_low DOUBLE NOT NULL, pour_high DOUBLE NOT NULL,
    provenance VARCHAR(500) NOT NULL, version INT NOT NULL DEFAULT 1)`,
  `CREATE TABLE IF NOT EXISTS fragrance (
    id ${ID} NOT NULL PRIMARY KEY, name VARCHAR(80) NOT NULL, flash_point DOUBLE NULL, certificate_max_load DOUBLE NULL, version INT NOT NULL DEFAULT 1)`,
  `CREATE TABLE IF NOT EXISTS design (
    id ${ID} NOT NULL PRIMARY KEY, name VARCHAR(80) NOT NULL, wax_id ${ID} NOT NULL, fragrance_id ${ID} NULL, load_percent_of_wax DOUBLE NOT NULL, wick VARCHAR(80) NOT NULL,
    vessel VARCHAR(80) NOT NULL, vessel_diameter_mm DOUBLE NOT NULL, fill_grams DOUBLE NOT NULL, version INT NOT NULL DEFAULT 1,
    CONSTRAINT design_wax FOREIGN KEY (wax_id) REFERENCES wax (id), CONSTRAINT design_fragrance FOREIGN KEY (fragrance_id) REFERENCES fragrance (id))`,
  `CREATE TABLE IF NOT EXISTS batch (
    id ${ID} NOT NULL PRIMARY KEY, studio_id ${ID} NOT NULL, code VARCHAR(24) NOT NULL, design_id ${ID} NOT NULL, vessels INT NOT NULL, poured_at ${AT} NOT NULL, poured_by ${ID} NULL,
    pour_celsius DOUBLE NULL, wax_grams DOUBLE NOT NULL, fragrance_grams DOUBLE NOT NULL, status VARCHAR(12) NOT NULL, ended_at ${AT} NULL, notes TEXT NOT NULL, version INT NOT NULL DEFAULT 1,
    UNIQUE KEY batch_code (studio_id, code), KEY batch_list (studio_id, status, poured_at), CONSTRAINT batch_studio FOREIGN KEY (studio_id) REFERENCES studio (id),
    CONSTRAINT batch_design FOREIGN KEY (design_id) REFERENCES design (id))`,
  `CREATE TABLE IF NOT EXISTS stay (
    id ${ID} NOT NULL PRIMARY KEY, batch_id ${ID} NOT NULL, shelf_id ${ID} NOT NULL, room_id ${ID} NOT NULL, from_at ${AT} NOT NULL, to_at ${AT} NULL,
    KEY stay_batch (batch_id, from_at), KEY stay_room (room_id, from_at), KEY stay_shelf (shelf_id, to_at), CONSTRAINT stay_batch FOREIGN KEY (batch_id) REFERENCES batch (id),
    CONSTRAINT stay_shelf FOREIGN KEY (shelf_id) REFERENCES shelf (id))`,
  `CREATE TABLE IF NOT EXISTS burn_verdict (
    id ${ID} NOT NULL PRIMARY KEY, batch_id ${ID} NOT NULL, design_id ${ID} NOT NULL, at ${AT} NOT NULL, passed TINYINT NOT NULL, note TEXT NOT NULL, signed_by ${ID} NOT NULL,
    hardening_at_test DOUBLE NOT NULL, cure_age_days DOUBLE NOT NULL, KEY verdict_design (design_id, at), KEY verdict_batch (batch_id),
    CONSTRAINT verdict_batch FOREIGN KEY (batch_id) REFERENCES batch (id))`,
  `CREATE TABLE IF NOT EXISTS rule_state (
    rule_key VARCHAR(100) CHARACTER SET ascii COLLATE ascii_bin NOT NULL PRIMARY KEY, state LONGTEXT NOT NULL, updated_at ${AT} NOT NULL)`,
  `CREATE TABLE IF NOT EXISTS alert (
    id ${ID} NOT NULL PRIMARY KEY, studio_id ${ID} NOT NULL, room_id ${ID} NULL, sensor_id ${ID} NULL, kind VARCHAR(20) NOT NULL, severity VARCHAR(10) NOT NULL, state VARCHAR(14) NOT NULL,
    facts LONGTEXT NOT NULL, raised_at ${AT} NOT NULL, cleared_at ${AT} NULL, acknowledged_by ${ID} NULL, acknowledged_at ${AT} NULL, acknowledge_note TEXT NULL,
    shelved_by ${ID} NULL, shelved_until ${AT} NULL, shelve_reason TEXT NULL, holder ${ID} NULL, escalation INT NOT NULL DEFAULT 0, next_escalation_at ${AT} NULL,
    version INT NOT NULL DEFAULT 1, KEY alert_list (studio_id, state, raised_at), KEY alert_room (room_id, raised_at))`,
  `CREATE TABLE IF NOT EXISTS alert_step (
    id BIGINT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY, alert_id ${ID} NOT NULL, at ${AT} NOT NULL, what VARCHAR(20) NOT NULL, who ${ID} NULL, note TEXT NOT NULL, value DOUBLE NULL,
    KEY step_alert (alert_id, id))`,
  `CREATE TABLE IF NOT EXISTS notice (
    id ${ID} NOT NULL PRIMARY KEY, person_id ${ID} NOT NULL, studio_id ${ID} NOT NULL, alert_id ${ID} NULL, at ${AT} NOT NULL, text TEXT NOT NULL, read_at ${AT} NULL, KEY notice_person (person_id, at))`,
  `CREATE TABLE IF NOT EXISTS outbox (
    id BIGINT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY, message_id VARCHAR(120) CHARACTER SET ascii COLLATE ascii_bin NOT NULL, recipient VARCHAR(200) NOT NULL, subject VARCHAR(300) NOT NULL, body MEDIUMTEXT NOT NULL,
    alert_id ${ID} NULL, person_id ${ID} NULL, state VARCHAR(10) NOT NULL, attempts INT NOT NULL DEFAULT 0, next_at ${AT} NOT NULL, last_error VARCHAR(500) NULL, created_at ${AT} NOT NULL, sent_at ${AT} NULL,
    lease_epoch BIGINT UNSIGNED NULL, UNIQUE KEY outbox_message (message_id), KEY outbox_due (state, next_at))`,
  `CREATE TABLE IF NOT EXISTS lease (
    name VARCHAR(40) CHARACTER SET ascii COLLATE ascii_bin NOT NULL PRIMARY KEY, holder ${ID} NOT NULL, epoch BIGINT UNSIGNED NOT NULL, expires_at ${AT} NOT NULL)`,
  `CREATE TABLE IF NOT EXISTS audit (
    id BIGINT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY, at ${AT} NOT NULL, person_id ${ID} NULL, who VARCHAR(100) NOT NULL, studio_id ${ID} NULL, action VARCHAR(60) NOT NULL, thing VARCHAR(40) NOT NULL,
    thing_id VARCHAR(64) NOT NULL, was LONGTEXT NULL, became LONGTEXT NULL, address VARCHAR(60) NOT NULL, KEY audit_thing (thing_id, id), KEY audit_studio (studio_id, id))`,
  `CREATE TABLE IF NOT EXISTS fact (name VARCHAR(60) CHARACTER SET ascii COLLATE ascii_bin NOT NULL PRIMARY KEY, value LONGTEXT NOT NULL)`,
];

const TABLE_NAMES = [
  'fact',
  'audit',
  'lease',
  'outbox',
  'notice',
  'alert_step',
  'alert',
  'rule_state',
  'burn_verdict',
  'stay',
  'batch',
  'design',
  'fragrance',
  'wax',
  'quarantine',
  'rollup',
  'dirty_mark',
  'sequence_seen',
  'reading',
  'sensor',
  'shelf',
  'rack',
  'room',
  'mailed_link',
  'refresh_token',
  'session',
  'membership',
  'studio',
  'person',
];
