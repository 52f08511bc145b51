import {
  type OrganisationSettings,
  type Role,
  organisationSettingsSchema,
  roleSchema,
} from '#shared/contracts/session.ts';
import type { EntityManager } from 'typeorm';
import { OrganisationEntity } from '../entities/organisation.entity.ts';
import { PersonRoleEntity } from '../entities/person-role.entity.ts';
import { PersonEntity } from '../entities/person.entity.ts';

export type PersonStatus = 'invited' | 'active' | 'deactivated';

export interface SignInRecord {
  id: string;
  organisationId: string;
  passwordHash: string | null;
  status: PersonStatus;
}

export interface ProfileRecord {
  person: { id: string; displayName: string; fullName: string; email: string };
  organisation: { id: string; name: string; settings: OrganisationSettings };
  roles: Role[];
}

export interface NewPerson {
  id: string;
  organisationId: string;
  email: string;
  displayName: string;
  fullName: string;
  passwordHash: string | null;
  status: PersonStatus;
  roles: Role[];
  at: Date;
}

/** The form of an address that sign-in compares. */
export function emailKey(email: string): string {
  return email.normalize('NFKC').trim().toLowerCase();
}

export function rolesOf(rows: readonly PersonRoleEntity[] | undefined): Role[] {
  return (rows ?? []).map((row) => roleSchema.parse(row.role)).sort();
}

export function createPeopleRepository(manager: EntityManager) {
  return {
    async findForSignIn(email: string): Promise<SignInRecord | null> {
      return manager.findOne(PersonEntity, {
        select: { id: true, organisationId: true, passwordHash: true, status: true },
        where: { emailKey: emailKey(email) },
      });
    },

    async findProfile(organisationId: string, personId: string): Promise<ProfileRecord | null> {
      const row = await manager.findOne(PersonEntity, {
        where: { id: personId, organisationId },
        relations: { organisation: true, roles: true },
      });
      if (row === null || row.organisation === undefined) return null;
      const { organisation } = row;
      return {
        person: { id: row.id, displayName: row.displayName, fullName: row.fullName, email: row.email },
        organisation: {
          id: organisation.id,
          name: organisation.name,
          settings: organisationSettingsSchema.parse(organisation.settings),
        },
        roles: rolesOf(row.roles),
      };
    },

    /** Active trainees of some cohorts, by name. */
    async traineesOf(
      organisationId: string,
      cohortIds: readonly string[],
    ): Promise<{ id: string; displayName: string }[]> {
      if (cohortIds.length === 0) return [];
      const rows = await manager
        .createQueryBuilder(PersonEntity, 'p')
        .select(['p.id', 'p.displayName'])
        .where(`p.organisationId = :organisationId AND p.status = 'active'`, { organisationId })
        .andWhere(
          `EXISTS (SELECT 1 FROM cohort_member m INNER JOIN cohort c ON c.id = m.cohort_id
            WHERE m.person_id = p.id AND m.cohort_id IN (:...cohortIds) AND c.organisation_id = :organisationId)`,
          { cohortIds: [...cohortIds] },
        )
        .andWhere(`EXISTS (SELECT 1 FROM person_role r WHERE r.person_id = p.id AND r.role = 'trainee')`)
        .orderBy('p.displayName', 'ASC')
        .getMany();
      return rows.map(({ id, displayName }) => ({ id, displayName }));
    },

    async exists(organisationId: string, personId: string): Promise<boolean> {
      return manager.exists(PersonEntity, { where: { id: personId, organisationId } });
    },

    /** Locks the person's row to the end of the transaction, so that what is counted per person stays gapless. */
    async lock(organisationId: string, personId: string): Promise<void> {
      await manager.findOne(PersonEntity, {
        select: { id: true },
        where: { id: personId, organisationId },
        lock: { mode: 'pessimistic_write' },
      });
    },

    async insert(person: NewPerson): Promise<void> {
      const { roles, at, ...columns } = person;
      await manager.insert(PersonEntity, {
        ...columns,
        emailKey: emailKey(person.email),
        createdAt: at,
        deactivatedAt: null,
      });
      if (roles.length === 0) return;
      await manager.insert(
        PersonRoleEntity,
        roles.map((role) => ({ personId: person.id, role, grantedAt: at })),
      );
    },

    async setStatus(organisationId: string, personId: string, status: PersonStatus, at: Date): Promise<void> {
      const deactivatedAt = status === 'deactivated' ? at : null;
      await manager.update(PersonEntity, { id: personId, organisationId }, { status, deactivatedAt });
    },

    /** People of the invented organisation, for the sign-in list printed at start; empty when there is none. */
    async demonstration(): Promise<{
      organisation: string;
      people: { email: string; displayName: string; roles: Role[] }[];
    }> {
      const organisation = await manager.findOne(OrganisationEntity, { where: { demonstration: true } });
      if (organisation === null) return { organisation: '', people: [] };
      const people = await manager.find(PersonEntity, {
        where: { organisationId: organisation.id, status: 'active' },
        relations: { roles: true },
        order: { createdAt: 'ASC', email: 'ASC' },
      });
      return {
        organisation: organisation.name,
        people: people.map((row) => ({ email: row.email, displayName: row.displayName, roles: rolesOf(row.roles) })),
      };
    },
  };
}

export type PeopleRepository = ReturnType<typeof createPeopleRepository>;
