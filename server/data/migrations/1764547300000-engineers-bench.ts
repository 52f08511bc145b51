import type { MigrationInterface, QueryRunner } from 'typeorm';

const OPTIONS = 'ENGINE=InnoDB DEFAULT CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci';
const NO_ACTION = 'ON DELETE NO ACTION ON UPDATE NO ACTION';

const TABLES: readonly { name: string; columns: string }[] = [
  {
    name: 'airframe_listing',
    columns: `
      organisation_id uuid NOT NULL,
      listed_as varchar(10) NOT NULL,
      airframe_id uuid NOT NULL,
      slug varchar(80) NOT NULL,
      number int UNSIGNED NOT NULL,
      status enum ('draft', 'released', 'retired') NOT NULL,
      name varchar(200) NOT NULL,
      airplane_class varchar(8) NOT NULL,
      engine_count int UNSIGNED NOT NULL,
      engine_kind varchar(10) NOT NULL,
      tags text NOT NULL,
      tag_keys text COLLATE utf8mb4_bin NOT NULL,
      search_key text COLLATE utf8mb4_bin NOT NULL,
      changed_at datetime(3) NOT NULL,
      PRIMARY KEY (organisation_id, listed_as, airframe_id),
      INDEX ix_airframe_listing_name (organisation_id, listed_as, name, airframe_id),
      INDEX ix_airframe_listing_changed (organisation_id, listed_as, changed_at, airframe_id),
      CONSTRAINT fk_airframe_listing_airframe FOREIGN KEY (airframe_id) REFERENCES airframe (id) ON DELETE CASCADE ON UPDATE NO ACTION`,
  },
  {
    name: 'airframe_skin',
    columns: `
      airframe_id uuid NOT NULL,
      file_name varchar(200) NOT NULL,
      byte_count int UNSIGNED NOT NULL,
      sha256 varchar(64) NOT NULL,
      uploaded_by uuid NULL,
      uploaded_at datetime(3) NOT NULL,
      PRIMARY KEY (airframe_id),
      CONSTRAINT fk_airframe_skin_airframe FOREIGN KEY (airframe_id) REFERENCES airframe (id) ON DELETE CASCADE ON UPDATE NO ACTION,
      CONSTRAINT fk_airframe_skin_uploader FOREIGN KEY (uploaded_by) REFERENCES person (id) ${NO_ACTION}`,
  },
  {
    name: 'airframe_skin_part',
    columns: `
      airframe_id uuid NOT NULL,
      part_index int UNSIGNED NOT NULL,
      bytes mediumblob NOT NULL,
      PRIMARY KEY (airframe_id, part_index),
      CONSTRAINT fk_airframe_skin_part_skin FOREIGN KEY (airframe_id) REFERENCES airframe_skin (airframe_id) ON DELETE CASCADE ON UPDATE NO ACTION`,
  },
  {
    name: 'study',
    columns: `
      id uuid NOT NULL,
      organisation_id uuid NOT NULL,
      name varchar(120) NOT NULL,
      note text NOT NULL,
      state json NOT NULL,
      version int UNSIGNED NOT NULL,
      author_id uuid NULL,
      created_at datetime(3) NOT NULL,
      changed_by uuid NULL,
      changed_at datetime(3) NOT NULL,
      PRIMARY KEY (id),
      INDEX ix_study_changed (organisation_id, changed_at),
      CONSTRAINT fk_study_organisation FOREIGN KEY (organisation_id) REFERENCES organisation (id) ${NO_ACTION},
      CONSTRAINT fk_study_author FOREIGN KEY (author_id) REFERENCES person (id) ${NO_ACTION},
      CONSTRAINT fk_study_changer FOREIGN KEY (changed_by) REFERENCES person (id) ${NO_ACTION}`,
  },
  {
    name: 'study_airframe',
    columns: `
      study_id uuid NOT NULL,
      position int UNSIGNED NOT NULL,
      airframe_revision_id uuid NOT NULL,
      PRIMARY KEY (study_id, position),
      INDEX ix_study_airframe_revision (airframe_revision_id),
      CONSTRAINT fk_study_airframe_study FOREIGN KEY (study_id) REFERENCES study (id) ON DELETE CASCADE ON UPDATE NO ACTION,
      CONSTRAINT fk_study_airframe_revision FOREIGN KEY (airframe_revision_id) REFERENCES airframe_revision (id) ${NO_ACTION}`,
  },
  {
    name: 'report_count',
    columns: `
      organisation_id uuid NOT NULL,
      kind varchar(20) NOT NULL,
      last_number int UNSIGNED NOT NULL,
      PRIMARY KEY (organisation_id, kind),
      CONSTRAINT fk_report_count_organisation FOREIGN KEY (organisation_id) REFERENCES organisation (id) ${NO_ACTION}`,
  },
];

const KIND = (kind: string): string =>
  `JSON_SEARCH(r.document, 'one', '${kind}', NULL, '$.engines[*].kind') IS NOT NULL`;
const TAGS = (text: string): string =>
  `SELECT GROUP_CONCAT(${text} ORDER BY t.tag SEPARATOR '\\n') FROM airframe_tag t WHERE t.airframe_id = r.airframe_id`;

/** Listings of the airframes that are there already: the newest revision, and the newest of each status. */
const listings = (listedAs: string, same: string): string => `
  INSERT INTO airframe_listing
  SELECT r.organisation_id, ${listedAs}, r.airframe_id, a.slug, r.number, r.status, r.name, r.airplane_class, r.engine_count,
    CASE WHEN ${KIND('jet')} AND ${KIND('propeller')} THEN 'mixed' WHEN ${KIND('jet')} THEN 'jet'
      WHEN ${KIND('propeller')} THEN 'propeller' ELSE 'none' END,
    COALESCE((${TAGS('t.tag')}), ''),
    COALESCE(CONCAT('\\n', (${TAGS('LOWER(t.tag)')}), '\\n'), ''),
    LOWER(CONCAT_WS(' ', r.name, a.slug, (${TAGS('t.tag')}), JSON_VALUE(r.document, '$.description'),
      JSON_EXTRACT(r.document, '$.sources[*].text'))),
    r.changed_at
  FROM airframe_revision r INNER JOIN airframe a ON a.id = r.airframe_id
  WHERE r.number = (SELECT MAX(n.number) FROM airframe_revision n WHERE n.airframe_id = r.airframe_id${same})`;

const KEPT = ['release_answers', 'version', 'changed_by'];

export class EngineersBench1764547300000 implements MigrationInterface {
  readonly name = 'EngineersBench1764547300000';

  async up(runner: QueryRunner): Promise<void> {
    await runner.query(`ALTER TABLE airframe_revision
      ADD COLUMN release_answers json NULL,
      ADD COLUMN version int UNSIGNED NULL,
      ADD COLUMN changed_by uuid NULL,
      ADD CONSTRAINT fk_airframe_revision_changer FOREIGN KEY (changed_by) REFERENCES person (id) ${NO_ACTION}`);
    await runner.query('UPDATE airframe_revision SET version = 1');
    await runner.query('ALTER TABLE airframe_revision MODIFY COLUMN version int UNSIGNED NOT NULL');
    for (const { name, columns } of TABLES) await runner.query(`CREATE TABLE ${name} (${columns}) ${OPTIONS}`);
    await runner.query(listings(`'any'`, ''));
    await runner.query(listings('r.status', ' AND n.status = r.status'));
    const changed = KEPT.map((column) => `NOT (OLD.${column} <=> NEW.${column})`).join(' OR ');
    await runner.query(`CREATE TRIGGER airframe_revision_keep_more BEFORE UPDATE ON airframe_revision FOR EACH ROW
      BEGIN IF OLD.status <> 'draft' AND (${changed})
      THEN SIGNAL SQLSTATE '45000' SET MESSAGE_TEXT = 'A released airframe revision never changes.'; END IF; END`);
  }

  async down(runner: QueryRunner): Promise<void> {
    await runner.query('DROP TRIGGER airframe_revision_keep_more');
    for (const { name } of TABLES.toReversed()) await runner.query(`DROP TABLE ${name}`);
    await runner.query('ALTER TABLE airframe_revision DROP FOREIGN KEY fk_airframe_revision_changer');
    await runner.query(
      'ALTER TABLE airframe_revision DROP COLUMN changed_by, DROP COLUMN version, DROP COLUMN release_answers',
    );
  }
}
