import { endpoint, resource } from '@/app/api/endpoint'
import { editionFile } from '@/lib/prediction/answers/editions'
import { downloadEditionLevels } from '@/openapi/operations/editions'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(downloadEditionLevels, ({ snapshot }) => editionFile(snapshot)))
