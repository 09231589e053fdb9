interface Step {
  context: (sql: string) => Promise<unknown>;
}

/** People, the roles they hold, what was tried at the door, and reset links (only their hashes). */
export async function up({ context: run }: Step): Promise<void> {
  await run(`CREATE TABLE IF NOT EXISTS people (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    name VARCHAR(80) NOT NULL,
    email VARCHAR(254) NOT NULL,
    password_hash VARCHAR(255) NOT NULL,
    active BOOLEAN NOT NULL DEFAULT TRUE,
    session_version INT UNSIGNED NOT NULL DEFAULT 0,
    last_sign_in_at DATETIME(3) NULL,
    created_at DATETIME(3) NOT NULL,
    UNIQUE KEY people_email (email)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS person_roles (
    person_id INT UNSIGNED NOT NULL,
    role VARCHAR(20) NOT NULL,
    PRIMARY KEY (person_id, role),
    CONSTRAINT person_roles_person FOREIGN KEY (person_id) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS sign_in_attempts (
    id BIGINT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    email VARCHAR(254) NOT NULL,
    address VARCHAR(64) NOT NULL,
    at DATETIME(3) NOT NULL,
    KEY sign_in_attempts_email (email, at),
    KEY sign_in_attempts_address (address, at)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS password_resets (
    id BIGINT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    person_id INT UNSIGNED NOT NULL,
    token_hash CHAR(64) NOT NULL,
    created_at DATETIME(3) NOT NULL,
    expires_at DATETIME(3) NOT NULL,
    used_at DATETIME(3) NULL,
    UNIQUE KEY password_resets_token (token_hash),
    CONSTRAINT password_resets_person FOREIGN KEY (person_id) REFERENCES people (id)
  ) ENGINE=InnoDB`);
}
