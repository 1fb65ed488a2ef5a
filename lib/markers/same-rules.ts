import type { FamilyId } from '@/lib/science/marker-families'
import { markerFamilies } from '@/lib/science/marker-families'
import type { SiteRules } from '@/lib/science/site-rules'

/** Whether two versions of the site's rules give a family's predictors the same meaning. */
export function isSameRules(family: FamilyId, one: SiteRules, other: SiteRules): boolean {
  return JSON.stringify(meaningOf(family, one)) === JSON.stringify(meaningOf(family, other))
}

/** The constants that a family's predictors are computed with, in a fixed order. */
function meaningOf(family: FamilyId, { dose, indices, stave }: SiteRules): unknown[] {
  return markerFamilies[family].predictors.map((key) => {
    switch (key) {
      case 'doseMin':
        return [dose.refTempC, dose.zC, dose.baseTempC]
      case 'slowIndexMin':
        return [dose.refTempC, indices.slowJPerMol]
      case 'fastIndexMin':
        return [dose.refTempC, indices.fastJPerMol]
      case 'toastDepthMm':
        return [
          dose.refTempC,
          dose.zC,
          dose.baseTempC,
          stave.toastDepthDoseMin,
          stave.specificGravity,
          stave.roomTempC,
          stave.coldFaceHWPerM2K,
        ]
    }
  })
}
