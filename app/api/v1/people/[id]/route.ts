import { actingOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { changePerson, readPerson } from '@/lib/access/people'
import { requireVersion } from '@/lib/entity-tag'
import * as accounts from '@/openapi/operations/accounts'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(accounts.getPerson, async ({ params }) => {
    const data = await readPerson(getDb(), params.id)
    return { data, etag: data.etag }
  }),
  endpoint(accounts.changePerson, async (call) => {
    const data = await changePerson(getDb(), actingOf(call), call.params.id, call.body, (person) => requireVersion(call.ifMatch, person.etag))
    return { data, etag: data.etag }
  }),
)
