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

    async insertCohort(cohort: {
      id: string;
      organisationId: string;
      name: string;
      memberIds: string[];
      at: Date;
    }): Promise<void> {
      const { id, organisationId, name, memberIds, at } = cohort;
      await manager.insert(CohortEntity, { id, organisationId, name, createdAt: at });
      await manager.insert(
        CohortMemberEntity,
        memberIds.map((personId) => ({ cohortId: id, personId, joinedAt: at })),
      );
    },
  };
}

export type OrganisationsRepository = ReturnType<typeof createOrganisationsRepository>;
