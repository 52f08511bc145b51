import {
  type OrganisationSettings,
  type Role,
  organisationSettingsSchema,
  roleSchema,
} from '#shared/contracts/session.ts';
import { personStateSchema, type PeopleQuery } from '#shared/contracts/administration.ts';
import type { EntityManager } from 'typeorm';
import { z } from 'zod';
import { OrganisationEntity } from '../entities/organisation.entity.ts';
import { PersonRoleEntity } from '../entities/person-role.entity.ts';
import { PersonEntity } from '../entities/person.entity.ts';
import { anywhere } from './like-pattern.ts';
import { offsetOf, type Rows } from './paging.ts';

export type PersonStatus = 'invited' | 'active' | 'deactivated';

export interface SignInRecord {
  id: string;
  organisationId: string;
  passwordHash: string | null;
  status: PersonStatus;
}

export interface ProfileRecord {
  person: {
    id: string;
    displayName: string;
    fullName: string;
    email: string;
    units: 'aviation' | 'si' | null;
    timeZone: string | null;
  };
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

const listedSchema = z.object({
  id: z.string(),
  email: z.string(),
  displayName: z.string(),
  fullName: z.string(),
  state: personStateSchema,
  roles: z.string().nullable(),
  cohorts: z.string().nullable(),
  invitationEndsAt: z.date().nullable(),
  lastSeenAt: z.date().nullable(),
});
const SEPARATOR = '\u001f';
const several = (joined: string | null): string[] => (joined === null ? [] : joined.split(SEPARATOR));

export interface ListedPerson {
  id: string;
  email: string;
  displayName: string;
  fullName: string;
  state: PersonStatus;
  roles: Role[];
  cohorts: string[];
  invitationEndsAt: Date | null;
  lastSeenAt: Date | null;
}

const LISTED = `SELECT p.id, p.email, p.display_name AS displayName, p.full_name AS fullName, p.status AS state,
           (SELECT GROUP_CONCAT(r.role ORDER BY r.role SEPARATOR '${SEPARATOR}') FROM person_role r WHERE r.person_id = p.id) AS roles,
           (SELECT GROUP_CONCAT(c.name ORDER BY c.name SEPARATOR '${SEPARATOR}') FROM cohort_member m
             INNER JOIN cohort c ON c.id = m.cohort_id WHERE m.person_id = p.id) AS cohorts,
           (SELECT MAX(l.expires_at) FROM account_link l WHERE l.person_id = p.id AND l.kind = 'invitation' AND l.used_at IS NULL)
             AS invitationEndsAt,
           (SELECT MAX(s.last_used_at) FROM session s WHERE s.person_id = p.id) AS lastSeenAt
         FROM person p`;

const listedPeople = (rows: unknown): ListedPerson[] =>
  z
    .array(listedSchema)
    .parse(rows)
    .map(({ roles, cohorts, ...person }) => ({
      ...person,
      roles: several(roles).map((role) => roleSchema.parse(role)),
      cohorts: several(cohorts),
    }));

/** The form of an address that sign-in compares. */
export function emailKey(email: string): string {
  return email.normalize('NFKC').trim().toLowerCase();
}

export function rolesOf(rows: readonly Pick<PersonRoleEntity, 'role'>[] | undefined): Role[] {
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
        person: {
          id: row.id,
          displayName: row.displayName,
          fullName: row.fullName,
          email: row.email,
          units: row.units,
          timeZone: row.timeZone,
        },
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
        units: null,
        timeZone: null,
      });
      if (roles.length === 0) return;
      await manager.insert(
        PersonRoleEntity,
        roles.map((role) => ({ personId: person.id, role, grantedAt: at })),
      );
    },

    async setProfile(
      personId: string,
      profile: { displayName: string; units: 'aviation' | 'si' | null; timeZone: string | null },
    ): Promise<void> {
      await manager.update(PersonEntity, { id: personId }, profile);
    },

    /** @throws a duplicate-key error when another person has the address */
    async setEmail(personId: string, email: string): Promise<void> {
      await manager.update(PersonEntity, { id: personId }, { email, emailKey: emailKey(email) });
    },

    async setStatus(organisationId: string, personId: string, status: PersonStatus, at: Date): Promise<void> {
      const deactivatedAt = status === 'deactivated' ? at : null;
      await manager.update(PersonEntity, { id: personId, organisationId }, { status, deactivatedAt });
    },

    async list(organisationId: string, query: PeopleQuery): Promise<Rows<ListedPerson>> {
      const where = ['p.organisation_id = ?'];
      const values: unknown[] = [organisationId];
      if (query.search !== '') {
        const pattern = anywhere(query.search);
        where.push('(p.display_name LIKE ? OR p.full_name LIKE ? OR p.email LIKE ?)');
        values.push(pattern, pattern, pattern);
      }
      if (query.state !== undefined) {
        where.push('p.status = ?');
        values.push(query.state);
      }
      if (query.role !== undefined) {
        where.push('EXISTS (SELECT 1 FROM person_role x WHERE x.person_id = p.id AND x.role = ?)');
        values.push(query.role);
      }
      const condition = where.join(' AND ');
      const rows: unknown = await manager.query(
        `${LISTED} WHERE ${condition} ORDER BY p.display_name, p.id LIMIT ? OFFSET ?`,
        [...values, query.pageSize, offsetOf(query)],
      );
      const counted: unknown = await manager.query(`SELECT COUNT(*) AS total FROM person p WHERE ${condition}`, values);
      const [{ total }] = z.tuple([z.object({ total: z.coerce.number() })]).parse(counted);
      return { items: listedPeople(rows), total };
    },

    async listed(organisationId: string, personId: string): Promise<ListedPerson | null> {
      const rows: unknown = await manager.query(`${LISTED} WHERE p.organisation_id = ? AND p.id = ?`, [
        organisationId,
        personId,
      ]);
      return listedPeople(rows)[0] ?? null;
    },

    /** Ids of active administrators, held to the end of the transaction, so that two do not remove each other. */
    async holdAdministrators(organisationId: string): Promise<string[]> {
      const rows: unknown = await manager.query(
        `SELECT p.id FROM person p INNER JOIN person_role r ON r.person_id = p.id AND r.role = 'administrator'
         WHERE p.organisation_id = ? AND p.status = 'active' ORDER BY p.id FOR UPDATE`,
        [organisationId],
      );
      return z
        .array(z.object({ id: z.string() }))
        .parse(rows)
        .map(({ id }) => id);
    },

    async setRoles(personId: string, roles: readonly Role[], at: Date): Promise<void> {
      await manager.delete(PersonRoleEntity, { personId });
      await manager.insert(
        PersonRoleEntity,
        roles.map((role) => ({ personId, role, grantedAt: at })),
      );
    },

    async setPassword(personId: string, passwordHash: string, status: PersonStatus): Promise<void> {
      await manager.update(PersonEntity, { id: personId }, { passwordHash, status });
    },

    async passwordHash(personId: string): Promise<string | null> {
      const row = await manager.findOne(PersonEntity, {
        select: { id: true, passwordHash: true },
        where: { id: personId },
      });
      return row?.passwordHash ?? null;
    },

    async status(organisationId: string, personId: string): Promise<PersonStatus | null> {
      const row = await manager.findOne(PersonEntity, {
        select: { id: true, status: true },
        where: { id: personId, organisationId },
        lock: { mode: 'pessimistic_write' },
      });
      return row?.status ?? null;
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
