import { endpoint, resource } from '@/app/api/endpoint'
import { profilesAnswer } from '@/lib/prediction/profiles-answer'
import { computeProfiles } from '@/openapi/operations/profiles'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(computeProfiles, ({ body, snapshot, warn }) => profilesAnswer(snapshot, body, warn)))
