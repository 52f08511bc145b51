import type { MigrationInterface, QueryRunner } from 'typeorm';

const OPTIONS = 'ENGINE=InnoDB DEFAULT CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci';

/** Personal access tokens, and the answers kept under idempotency keys. */
export class Tokens1764548300000 implements MigrationInterface {
  readonly name = 'Tokens1764548300000';

  async up(runner: QueryRunner): Promise<void> {
    await runner.query(`CREATE TABLE access_token (
      id uuid NOT NULL,
      person_id uuid NOT NULL,
      name varchar(80) NOT NULL,
      beginning varchar(16) CHARACTER SET ascii COLLATE ascii_bin NOT NULL,
      token_hash char(64) CHARACTER SET ascii COLLATE ascii_bin NOT NULL,
      scopes varchar(1000) CHARACTER SET ascii COLLATE ascii_bin NOT NULL,
      created_at datetime(3) NOT NULL,
      expires_at datetime(3) NOT NULL,
      last_used_at datetime(3) NULL,
      revoked_at datetime(3) NULL,
      PRIMARY KEY (id),
      UNIQUE INDEX ux_access_token_hash (token_hash),
      INDEX ix_access_token_person (person_id, created_at),
      CONSTRAINT fk_access_token_person FOREIGN KEY (person_id) REFERENCES person (id) ON DELETE CASCADE
    ) ${OPTIONS}`);
    await runner.query(`CREATE TABLE idempotency_key (
      person_id uuid NOT NULL,
      key_text varchar(200) CHARACTER SET ascii COLLATE ascii_bin NOT NULL,
      fingerprint char(64) CHARACTER SET ascii COLLATE ascii_bin NOT NULL,
      begun_at datetime(3) NOT NULL,
      status smallint UNSIGNED NULL,
      location varchar(400) NULL,
      etag varchar(80) NULL,
      body mediumtext NULL,
      PRIMARY KEY (person_id, key_text),
      INDEX ix_idempotency_key_begun (begun_at),
      CONSTRAINT fk_idempotency_key_person FOREIGN KEY (person_id) REFERENCES person (id) ON DELETE CASCADE
    ) ${OPTIONS}`);
  }

  async down(runner: QueryRunner): Promise<void> {
    for (const table of ['idempotency_key', 'access_token']) await runner.query(`DROP TABLE ${table}`);
  }
}
