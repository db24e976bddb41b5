import { AccessTokenEntity, AuditEntryEntity, PersonEntity } from "../features/accounts";
import {
  CategoryEntity, EventEntity, ListingEntity, ProductEntity, ProductFundingEntity, ProductTermsEntity, StoreEntity, TemperatureEntity,
} from "../features/catalogue";
import { ChainEntity } from "../features/chain";
import { ModelEntity, ModelFitEntity } from "../features/drivers";
import { ExtractEntity, ExtractIssueEntity, SavedLayoutEntity, StoreWeekEntity } from "../features/extracts";
import { JobEntity } from "../features/jobs";
import { ScenarioEntity } from "../features/scenarios";
import { SentNoticeEntity } from "../features/notices";
import { OutboxMessageEntity } from "../mail/outbox.entity";

/** Every mapped table; sales rows are not among them: they move in sets, by SQL. */
export const entities = [
  ChainEntity, PersonEntity, AccessTokenEntity, AuditEntryEntity, JobEntity, OutboxMessageEntity,
  CategoryEntity, StoreEntity, ProductEntity, ProductTermsEntity, ProductFundingEntity, ListingEntity, EventEntity, TemperatureEntity,
  ExtractEntity, ExtractIssueEntity, SavedLayoutEntity, StoreWeekEntity, ModelEntity, ModelFitEntity, ScenarioEntity, SentNoticeEntity,
];
