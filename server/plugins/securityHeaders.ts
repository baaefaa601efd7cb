import { randomBytes } from 'node:crypto'
import { setResponseHeader } from 'h3'

/** A page's scripts and style sheets carry a nonce; nothing else runs, nothing is loaded from elsewhere. */
function policy(nonce: string, dev: boolean) {
  return [
    'default-src \'self\'',
    // WebAssembly may be compiled (a GeoPackage is read in the page); text may not be evaluated.
    `script-src 'self' 'nonce-${nonce}' 'wasm-unsafe-eval'${dev ? ' \'unsafe-eval\'' : ''}`,
    dev ? 'style-src \'self\' \'unsafe-inline\'' : `style-src 'self' 'nonce-${nonce}'`,
    'style-src-attr \'unsafe-inline\'',
    'img-src \'self\' data: blob:',
    'font-src \'self\' data:',
    `connect-src 'self'${dev ? ' ws:' : ''}`,
    'worker-src \'self\' blob:',
    'object-src \'none\'',
    'base-uri \'none\'',
    'form-action \'self\'',
    'frame-ancestors \'none\'',
  ].join('; ')
}

export default defineNitroPlugin((nitroApp) => {
  nitroApp.hooks.hook('render:html', (html, { event }) => {
    const nonce = randomBytes(16).toString('base64')
    const mark = (part: string) => part.replace(/<(script|style|link)(?=[\s>])/g, `<$1 nonce="${nonce}"`)
    html.head = html.head.map(mark)
    html.bodyPrepend = html.bodyPrepend.map(mark)
    html.bodyAppend = html.bodyAppend.map(mark)
    setResponseHeader(event, 'content-security-policy', policy(nonce, import.meta.dev))
    // A page holds its nonce and what its reader may see: no cache between may give it to somebody else.
    setResponseHeader(event, 'cache-control', 'private, no-cache')
  })
  nitroApp.hooks.hook('render:response', (response) => {
    if (response.headers) delete response.headers['x-powered-by']
  })
})
