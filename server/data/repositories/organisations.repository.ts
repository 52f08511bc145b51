import { organisationSettingsSchema, type OrganisationSettings } from '#shared/contracts/session.ts';
import type { EntityManager } from 'typeorm';
import { CohortMemberEntity } from '../entities/cohort-member.entity.ts';
import { CohortEntity } from '../entities/cohort.entity.ts';
import { OrganisationEntity } from '../entities/organisation.entity.ts';

export interface NewOrganisation {
  id: string;
  slug: string;
  name: string;
  settings: OrganisationSettings;
  demonstration: boolean;
  at: Date;
}

export function createOrganisationsRepository(manager: EntityManager) {
  return {
    async none(): Promise<boolean> {
      return (await manager.count(OrganisationEntity)) === 0;
    },

    /** Holds the organisation to the end of the transaction, so that short names within it are given out one after another. */
    async takeTurn(organisationId: string): Promise<void> {
      await manager.findOneOrFail(OrganisationEntity, {
        select: { id: true },
        where: { id: organisationId },
        lock: { mode: 'pessimistic_write' },
      });
    },

    async settings(id: string): Promise<OrganisationSettings> {
      const row = await manager.findOneOrFail(OrganisationEntity, {
        select: { id: true, settings: true },
        where: { id },
      });
      return organisationSettingsSchema.parse(row.settings);
    },

    async insert({ at, ...organisation }: NewOrganisation): Promise<void> {
      await manager.insert(OrganisationEntity, {
        ...organisation,
        settings: { ...organisation.settings },
        createdAt: at,
      });
    },

    /** Marks the one first set-up. @throws a duplicate-key error when another has been done meanwhile */
    async markSetUp(organisationId: string, at: Date): Promise<void> {
      await manager.query('INSERT INTO first_set_up (id, organisation_id, at) VALUES (1, ?, ?)', [organisationId, at]);
    },

    /** True when there is the invented organisation. */
    async demonstration(): Promise<boolean> {
      return manager.exists(OrganisationEntity, { where: { demonstration: true } });
    },

    async rename(id: string, name: string, settings: OrganisationSettings): Promise<void> {
      await manager.update(OrganisationEntity, { id }, { name, settings: { ...settings } });
    },

    async cohortNamed(organisationId: string, name: string): Promise<string | null> {
      const row = await manager.findOne(CohortEntity, { select: { id: true }, where: { organisationId, name } });
      return row?.id ?? null;
    },

    async joinCohort(cohortId: string, personId: string, at: Date): Promise<void> {
      await manager.query('INSERT IGNORE INTO cohort_member (cohort_id, person_id, joined_at) VALUES (?, ?, ?)', [
        cohortId,
        personId,
        at,
      ]);
    },

    async insertCohort(cohort: {
      id: string;
      organisationId: string;
      name: string;
      memberIds: string[];
      at: Date;
    }): Promise<void> {
      const { id, organisationId, name, memberIds, at } = cohort;
      await manager.insert(CohortEntity, { id, organisationId, name, createdAt: at, archivedAt: null });
      if (memberIds.length === 0) return;
      await manager.insert(
        CohortMemberEntity,
        memberIds.map((personId) => ({ cohortId: id, personId, joinedAt: at })),
      );
    },
  };
}

export type OrganisationsRepository = ReturnType<typeof createOrganisationsRepository>;
