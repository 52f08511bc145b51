import { Column, Entity, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { OrganisationEntity } from './organisation.entity.ts';

/** Last number given to a printed report of a kind. */
@Entity('report_count')
export class ReportCountEntity {
  @PrimaryColumn({ name: 'organisation_id', type: 'uuid' })
  organisationId!: string;

  @PrimaryColumn({ type: 'varchar', length: 20 })
  kind!: string;

  @ManyToOne(() => OrganisationEntity)
  @JoinColumn({ name: 'organisation_id', foreignKeyConstraintName: 'fk_report_count_organisation' })
  organisation?: Relation<OrganisationEntity>;

  @Column({ name: 'last_number', type: 'int', unsigned: true })
  lastNumber!: number;
}
