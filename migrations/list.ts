import { M0001AccountsSiteAudit } from './m0001-accounts-site-audit'
import { M0002HearthsGatewaysProbes } from './m0002-hearths-gateways-probes'
import { M0003Recipes } from './m0003-recipes'
import { M0004BatchesPieces } from './m0004-batches-pieces'
import { M0005FiringsMarks } from './m0005-firings-marks'
import { M0006ReadingsSeals } from './m0006-readings-seals'
import { M0007Scores } from './m0007-scores'
import { M0008Markers } from './m0008-markers'
import { M0009GatewayEnrolmentProbeHistory } from './m0009-gateway-enrolment-probe-history'
import { M0010Alarms } from './m0010-alarms'
import { M0011PhotosLossesConditions } from './m0011-photos-losses-conditions'
import { M0012DevicesPins } from './m0012-devices-pins'
import { M0013Sequence } from './m0013-sequence'

/** In the order in which they run; a landed migration is never edited. */
export const migrationsList = [
  { name: 'm0001-accounts-site-audit', class: M0001AccountsSiteAudit },
  { name: 'm0002-hearths-gateways-probes', class: M0002HearthsGatewaysProbes },
  { name: 'm0003-recipes', class: M0003Recipes },
  { name: 'm0004-batches-pieces', class: M0004BatchesPieces },
  { name: 'm0005-firings-marks', class: M0005FiringsMarks },
  { name: 'm0006-readings-seals', class: M0006ReadingsSeals },
  { name: 'm0007-scores', class: M0007Scores },
  { name: 'm0008-markers', class: M0008Markers },
  { name: 'm0009-gateway-enrolment-probe-history', class: M0009GatewayEnrolmentProbeHistory },
  { name: 'm0010-alarms', class: M0010Alarms },
  { name: 'm0011-photos-losses-conditions', class: M0011PhotosLossesConditions },
  { name: 'm0012-devices-pins', class: M0012DevicesPins },
  { name: 'm0013-sequence', class: M0013Sequence },
]
