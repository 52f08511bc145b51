import { Column, Entity, JoinColumn, ManyToOne, PrimaryColumn, type Relation } from 'typeorm';
import { PersonEntity } from './person.entity.ts';

@Entity('person_role')
export class PersonRoleEntity {
  @PrimaryColumn({ name: 'person_id', type: 'uuid' })
  personId!: string;

  @PrimaryColumn({ type: 'varchar', length: 20 })
  role!: string;

  @ManyToOne(() => PersonEntity, (person) => person.roles, { onDelete: 'CASCADE' })
  @JoinColumn({ name: 'person_id', foreignKeyConstraintName: 'fk_person_role_person' })
  person?: Relation<PersonEntity>;

  @Column({ name: 'granted_at', type: 'datetime', precision: 3 })
  grantedAt!: Date;
}
