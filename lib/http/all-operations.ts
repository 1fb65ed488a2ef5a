import { operations as accounts } from '@/lib/accounts/operations'
import { operations as alarms } from '@/lib/alarms/operations'
import { operations as audit } from '@/lib/audit/operations'
import { operations as losses } from '@/lib/barrels/operations'
import { operations as batches } from '@/lib/batches/operations'
import { operations as conditions } from '@/lib/conditions/operations'
import { operations as devices } from '@/lib/devices/operations'
import { operations as firings } from '@/lib/firings/operations'
import { operations as photos } from '@/lib/firings/photo-operations'
import { operations as http } from '@/lib/http/operations'
import { operations as ingest } from '@/lib/ingest/operations'
import { operations as markers } from '@/lib/markers/operations'
import { operations as probes } from '@/lib/probes/operations'
import { operations as studies } from '@/lib/probes/study-operations'
import { operations as recipes } from '@/lib/recipes/operations'
import { operations as site } from '@/lib/site/operations'
import type { AnyOperation } from '@/lib/http/operation'

/**
 * Every operation of the HTTP surface, area by area: the OpenAPI document and the access test are made from this
 * list. A new area adds its import and its line.
 */
const areas: readonly Readonly<Record<string, AnyOperation>>[] = [
  accounts,
  alarms,
  audit,
  losses,
  batches,
  conditions,
  devices,
  firings,
  photos,
  http,
  ingest,
  markers,
  probes,
  studies,
  recipes,
  site,
]

export const allOperations: readonly AnyOperation[] = areas.flatMap((area) => Object.values(area))
