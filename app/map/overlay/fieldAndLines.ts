// What an overlay is computed by, fetched together with the first one.

export { responseAtPlace } from '#shared/earth/pointResponse'
export { mapSettings, sensitivityGrid } from './sensitivityGrid'
export { lineFeatures, sensitivityLines } from './sensitivityLines'
