'use client'
import { RequestPanel } from '../../_components/request-panel'

/** A first request that shows the point: sodium D1 at 1.5 T. */
export function ApiStart() {
  return <RequestPanel path="/transitions/Na-I.1~Na-I.2/components" query={{ field: '1.5T' }} title="A first request: sodium D1 at 1.5 T" open />
}
