import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { listPeople } from '@/lib/access/people'
import { pageOf } from '@/lib/http/pages'
import * as accounts from '@/openapi/operations/accounts'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(accounts.listPeople, async ({ query, after }) => pageOf(await listPeople(getDb(), query, after, query.limit), query.limit, (person) => [person.name, person.id])),
)
