declare module 'swagger-ui-dist/swagger-ui-es-bundle.js' {
  const start: unknown
  export default start
}
