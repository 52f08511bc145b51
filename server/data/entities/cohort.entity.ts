import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { OrganisationEntity } from './organisation.entity.ts';

@Entity('cohort')
@Index('ux_cohort_organisation_name', ['organisationId', 'name'], { unique: true })
export class CohortEntity {
  @PrimaryColumn({ type: 'uuid' })
  id!: string;

  @Column({ name: 'organisation_id', type: 'uuid' })
  organisationId!: string;

  @ManyToOne(() => OrganisationEntity)
  @JoinColumn({ name: 'organisation_id', foreignKeyConstraintName: 'fk_cohort_organisation' })
  organisation?: Relation<OrganisationEntity>;

  @Column({ type: 'varchar', length: 80 })
  name!: string;

  @Column({ name: 'created_at', type: 'datetime', precision: 3 })
  createdAt!: Date;

  /** Not offered for assignments and classes any more; records keep it. */
  @Column({ name: 'archived_at', type: 'datetime', precision: 3, nullable: true })
  archivedAt!: Date | null;
}
