import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { OrganisationEntity } from './organisation.entity.ts';

/** What stays the same over all revisions. */
@Entity('scenario')
@Index('ux_scenario_organisation_slug', ['organisationId', 'slug'], { unique: true })
export class ScenarioEntity {
  @PrimaryColumn({ type: 'uuid' })
  id!: string;

  @Column({ name: 'organisation_id', type: 'uuid' })
  organisationId!: string;

  @ManyToOne(() => OrganisationEntity)
  @JoinColumn({ name: 'organisation_id', foreignKeyConstraintName: 'fk_scenario_organisation' })
  organisation?: Relation<OrganisationEntity>;

  @Column({ type: 'varchar', length: 80 })
  slug!: string;

  @Column({ name: 'created_at', type: 'datetime', precision: 3 })
  createdAt!: Date;
}
