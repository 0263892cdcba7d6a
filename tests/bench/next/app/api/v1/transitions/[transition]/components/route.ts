export { GET } from '@/app/api/v1/transitions/[transition]/components/route'
