import { Column, Entity, Index, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { OrganisationEntity } from './organisation.entity.ts';

/** What stays the same over all revisions. */
@Entity('airframe')
@Index('ux_airframe_organisation_slug', ['organisationId', 'slug'], { unique: true })
export class AirframeEntity {
  @PrimaryColumn({ type: 'uuid' })
  id!: string;

  @Column({ name: 'organisation_id', type: 'uuid' })
  organisationId!: string;

  @ManyToOne(() => OrganisationEntity)
  @JoinColumn({ name: 'organisation_id', foreignKeyConstraintName: 'fk_airframe_organisation' })
  organisation?: Relation<OrganisationEntity>;

  @Column({ type: 'varchar', length: 80 })
  slug!: string;

  @Column({ name: 'created_at', type: 'datetime', precision: 3 })
  createdAt!: Date;
}
