'use client'
import 'swagger-ui-dist/swagger-ui.css'
import './reference.css'
import { useEffect, useRef, useState } from 'react'
import { Notice } from '../../_components/notice'
import { Skeleton } from '../../_components/skeleton'

type Start = (options: Record<string, unknown>) => unknown

/** The interactive reference. It is heavy, so it is fetched here and on no other page. */
export function Reference() {
  const place = useRef<HTMLDivElement>(null)
  const [state, setState] = useState<'loading' | 'ready' | 'failed'>('loading')
  useEffect(() => {
    let gone = false
    const node = place.current
    import('swagger-ui-dist/swagger-ui-es-bundle.js')
      .then((module) => {
        if (gone || node === null) return
        ;(module.default as Start)({
          url: '/api/v1/openapi.json', domNode: node, docExpansion: 'list', defaultModelsExpandDepth: -1, tryItOutEnabled: true, deepLinking: false, filter: true,
          onComplete: () => {
            // The page has its own main landmark.
            for (const main of node.querySelectorAll('main')) main.setAttribute('role', 'group')
            setState('ready')
          },
        })
      })
      .catch(() => setState('failed'))
    return () => { gone = true }
  }, [])
  return (
    <>
      {state === 'loading' ? <Skeleton label="Loading the reference" className="h-96 w-full" /> : null}
      {state === 'failed' ? <Notice tone="bad" role="alert" title="The reference could not be loaded"><p>The OpenAPI document above holds the same. Reload the page to try again.</p></Notice> : null}
      <div ref={place} className="reference" />
    </>
  )
}
