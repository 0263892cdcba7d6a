import { resource } from '@/app/api/endpoint'

/** Every path that no operation answers at: 404 as a problem, for every method. */
export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource()
