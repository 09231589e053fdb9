interface Step {
  context: (sql: string) => Promise<unknown>;
}

const IMMUTABLE = ['withdrawal_proposals', 'withdrawal_answers', 'comments', 'comment_mentions'];

/**
 * Withdrawing an accepted reading takes two people: one proposes it with a reason, another confirms or declines.
 * Comments stand beside a reading and may name people.
 */
export async function up({ context: run }: Step): Promise<void> {
  await run(`CREATE TABLE IF NOT EXISTS withdrawal_proposals (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    reading_id INT UNSIGNED NOT NULL,
    reason VARCHAR(1000) NOT NULL,
    proposed_by INT UNSIGNED NOT NULL,
    proposed_at DATETIME(3) NOT NULL,
    KEY withdrawal_proposals_reading (reading_id, id),
    CONSTRAINT withdrawal_proposals_reading FOREIGN KEY (reading_id) REFERENCES readings (id),
    CONSTRAINT withdrawal_proposals_person FOREIGN KEY (proposed_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS withdrawal_answers (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    proposal_id INT UNSIGNED NOT NULL,
    answer VARCHAR(12) NOT NULL,
    words VARCHAR(1000) NOT NULL DEFAULT '',
    answered_by INT UNSIGNED NOT NULL,
    answered_at DATETIME(3) NOT NULL,
    UNIQUE KEY withdrawal_answers_proposal (proposal_id),
    CONSTRAINT withdrawal_answers_proposal FOREIGN KEY (proposal_id) REFERENCES withdrawal_proposals (id),
    CONSTRAINT withdrawal_answers_person FOREIGN KEY (answered_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS comments (
    id INT UNSIGNED NOT NULL AUTO_INCREMENT PRIMARY KEY,
    reading_id INT UNSIGNED NOT NULL,
    words VARCHAR(1000) NOT NULL,
    made_by INT UNSIGNED NOT NULL,
    made_at DATETIME(3) NOT NULL,
    KEY comments_reading (reading_id, id),
    CONSTRAINT comments_reading FOREIGN KEY (reading_id) REFERENCES readings (id),
    CONSTRAINT comments_person FOREIGN KEY (made_by) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  await run(`CREATE TABLE IF NOT EXISTS comment_mentions (
    comment_id INT UNSIGNED NOT NULL,
    person_id INT UNSIGNED NOT NULL,
    PRIMARY KEY (comment_id, person_id),
    CONSTRAINT comment_mentions_comment FOREIGN KEY (comment_id) REFERENCES comments (id),
    CONSTRAINT comment_mentions_person FOREIGN KEY (person_id) REFERENCES people (id)
  ) ENGINE=InnoDB`);
  for (const table of IMMUTABLE) {
    for (const verb of ['UPDATE', 'DELETE']) {
      await run(
        `CREATE OR REPLACE TRIGGER ${table}_no_${verb.toLowerCase()} BEFORE ${verb} ON ${table} FOR EACH ROW
         SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'Rows of ${table} are never changed or deleted'`,
      );
    }
  }
}
