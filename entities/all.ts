import { AccountLinkEntity } from './account-link'
import { AccountPinEntity } from './account-pin'
import { AccountEntity } from './account'
import { AlarmEventEntity } from './alarm-event'
import { AuditEntryEntity } from './audit-entry'
import { BatchEntity } from './batch'
import { ConditionReadingEntity } from './condition-reading'
import { CueEntity } from './cue'
import { CustomerEntity } from './customer'
import { ExposureReadingEntity } from './exposure-reading'
import { ExposureUploadEntity } from './exposure-upload'
import { FiringPhotoEntity } from './firing-photo'
import { DeviceEnrolmentEntity } from './device-enrolment'
import { DeviceEntity } from './device'
import { ForecastOutcomeEntity } from './forecast-outcome'
import { FiringPlacementEntity } from './firing-placement'
import { FiringProbeEntity } from './firing-probe'
import { FiringEntity } from './firing'
import { GatewayBootEntity } from './gateway-boot'
import { GatewayEnrolmentEntity } from './gateway-enrolment'
import { GatewayLossEntity } from './gateway-loss'
import { GatewayTokenEntity } from './gateway-token'
import { GatewayEntity } from './gateway'
import { HearthEntity } from './hearth'
import { LossEntity } from './loss'
import { MarkEntity } from './mark'
import { MarkerResponseEntity } from './marker-response'
import { MarkerEntity } from './marker'
import { PieceEntity } from './piece'
import { ProbeCheckEntity } from './probe-check'
import { ProbePlaceEntity } from './probe-place'
import { ProbeEntity } from './probe'
import { ReadingEntity } from './reading'
import { RecipeVersionEntity } from './recipe-version'
import { RecipeEntity } from './recipe'
import { RefusedReadingEntity } from './refused-reading'
import { RepeatabilityPlacementEntity } from './repeatability-placement'
import { RepeatabilityStudyEntity } from './repeatability-study'
import { ScoreEntity } from './score'
import { SealEntity } from './seal'
import { SessionEntity } from './session'
import { SignInThrottleEntity } from './sign-in-throttle'
import { SignatureEntity } from './signature'
import { SiteSettingsEntity } from './site-settings'
import { StageEntity } from './stage'
import { WaterCheckEntity } from './water-check'

/** Every entity, for the ORM's discovery. */
export const entities = [
  AccountLinkEntity,
  AccountPinEntity,
  AccountEntity,
  AlarmEventEntity,
  AuditEntryEntity,
  BatchEntity,
  ConditionReadingEntity,
  CueEntity,
  CustomerEntity,
  ExposureReadingEntity,
  ExposureUploadEntity,
  FiringPhotoEntity,
  DeviceEnrolmentEntity,
  DeviceEntity,
  FiringPlacementEntity,
  FiringProbeEntity,
  FiringEntity,
  ForecastOutcomeEntity,
  GatewayBootEntity,
  GatewayEnrolmentEntity,
  GatewayLossEntity,
  GatewayTokenEntity,
  GatewayEntity,
  HearthEntity,
  LossEntity,
  MarkEntity,
  MarkerResponseEntity,
  MarkerEntity,
  PieceEntity,
  ProbeCheckEntity,
  ProbePlaceEntity,
  ProbeEntity,
  ReadingEntity,
  RecipeVersionEntity,
  RecipeEntity,
  RefusedReadingEntity,
  RepeatabilityPlacementEntity,
  RepeatabilityStudyEntity,
  ScoreEntity,
  SealEntity,
  SessionEntity,
  SignInThrottleEntity,
  SignatureEntity,
  SiteSettingsEntity,
  StageEntity,
  WaterCheckEntity,
]
