// Panels of the map page that stand there only once somebody asks for them.

export const MapBroughtOutlines = late(() => import('~/components/map/BroughtOutlines.vue'))
export const MapBroughtStored = late(() => import('~/components/map/BroughtStored.vue'))
export const MapDrawingWords = late(() => import('~/components/map/MapDrawingWords.vue'))
export const MapKeptNote = late(() => import('~/components/map/MapKeptNote.vue'))
export const MapMonths = late(() => import('~/components/map/MapMonths.vue'))
export const MapOutlineImport = late(() => import('~/components/map/OutlineImport.vue'))
export const MapOutlinePanel = late(() => import('~/components/map/OutlinePanel.vue'))
export const MapOverlayKey = late(() => import('~/components/map/MapOverlayKey.vue'))
export const MapPolar = late(() => import('~/components/map/MapPolar.vue'))
export const MapSharedGround = late(() => import('~/components/map/MapSharedGround.vue'))
export const MapWorkPanel = late(() => import('~/components/map/WorkPanel.vue'))
