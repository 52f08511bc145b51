import { Column, Entity, Index, PrimaryColumn } from 'typeorm';

@Entity('organisation')
@Index('ux_organisation_slug', ['slug'], { unique: true })
export class OrganisationEntity {
  @PrimaryColumn({ type: 'uuid' })
  id!: string;

  @Column({ type: 'varchar', length: 80 })
  slug!: string;

  @Column({ type: 'varchar', length: 200 })
  name!: string;

  /** Parsed by organisationSettingsSchema on the way out. */
  @Column({ type: 'json' })
  settings!: unknown;

  /** The invented organisation that an empty database is seeded with. */
  @Column({ type: 'boolean' })
  demonstration!: boolean;

  @Column({ name: 'created_at', type: 'datetime', precision: 3 })
  createdAt!: Date;
}
