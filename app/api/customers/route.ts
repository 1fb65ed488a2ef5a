import { createCustomer } from '@/lib/accounts/create-customer'
import { listCustomers } from '@/lib/accounts/list-customers'
import { operations } from '@/lib/accounts/operations'
import { route } from '@/lib/http/route'

export const GET = route(operations.listCustomers, (actor, call) => listCustomers(actor, call.query))
export const POST = route(operations.createCustomer, (actor, call) => createCustomer(actor, call.body))
