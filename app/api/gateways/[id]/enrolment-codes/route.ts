import { route } from '@/lib/http/route'
import { makeEnrolmentCode } from '@/lib/ingest/make-enrolment-code'
import { operations } from '@/lib/ingest/operations'

export const POST = route(operations.makeEnrolmentCode, (actor, { params }) =>
  makeEnrolmentCode(actor, { gatewayId: params.id }),
)
