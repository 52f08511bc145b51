import { AirframeListingEntity } from './airframe-listing.entity.ts';
import { AirframeRevisionEntity } from './airframe-revision.entity.ts';
import { AirframeSkinPartEntity } from './airframe-skin-part.entity.ts';
import { AirframeSkinEntity } from './airframe-skin.entity.ts';
import { AirframeTagEntity } from './airframe-tag.entity.ts';
import { AirframeEntity } from './airframe.entity.ts';
import { AttemptChunkEntity } from './attempt-chunk.entity.ts';
import { AttemptResultEntity } from './attempt-result.entity.ts';
import { AttemptEntity } from './attempt.entity.ts';
import { AuditEntryEntity } from './audit-entry.entity.ts';
import { CohortMemberEntity } from './cohort-member.entity.ts';
import { CohortEntity } from './cohort.entity.ts';
import { OrganisationEntity } from './organisation.entity.ts';
import { PersonRoleEntity } from './person-role.entity.ts';
import { PersonEntity } from './person.entity.ts';
import { RefreshTokenEntity } from './refresh-token.entity.ts';
import { RemarkEntity } from './remark.entity.ts';
import { ReportCountEntity } from './report-count.entity.ts';
import { ScenarioRevisionEntity } from './scenario-revision.entity.ts';
import { ScenarioEntity } from './scenario.entity.ts';
import { SessionEntity } from './session.entity.ts';
import { SignOffEntity } from './sign-off.entity.ts';
import { StudyAirframeEntity } from './study-airframe.entity.ts';
import { StudyEntity } from './study.entity.ts';
import { ThrottleCountEntity } from './throttle-count.entity.ts';
import { LiveClassEntity } from './live-class.entity.ts';
import { ClassMemberEntity } from './class-member.entity.ts';
import { ClassEntryEntity } from './class-entry.entity.ts';
import { ClassAttemptEntity } from './class-attempt.entity.ts';

/** Every entity of the data source. */
export const ENTITIES = [
  OrganisationEntity,
  PersonEntity,
  PersonRoleEntity,
  CohortEntity,
  CohortMemberEntity,
  SessionEntity,
  RefreshTokenEntity,
  AirframeEntity,
  AirframeTagEntity,
  AirframeRevisionEntity,
  ScenarioEntity,
  ScenarioRevisionEntity,
  AttemptEntity,
  AttemptChunkEntity,
  AttemptResultEntity,
  AuditEntryEntity,
  RemarkEntity,
  SignOffEntity,
  AirframeListingEntity,
  AirframeSkinEntity,
  AirframeSkinPartEntity,
  StudyEntity,
  StudyAirframeEntity,
  ReportCountEntity,
  ClassAttemptEntity,
  ClassEntryEntity,
  ClassMemberEntity,
  LiveClassEntity,
  ThrottleCountEntity,
];
