import type { BackgroundRow } from '../types/run.ts'

/**
 * Rates that no region holds, as published, offered to every scenario and editable there. The core convention is the
 * one that each source assumes.
 */
export const publishedBackground: readonly BackgroundRow[] = [
  {
    key: 'tidal-braking', name: 'Tidal braking', core: 'coupled',
    source: 'Stephenson, Morrison & Hohenkerk (2016), Proc. R. Soc. A 472, 20160404: +2.3 ± 0.1 ms per century.',
    lodMsPerCentury: { value: 2.3, sigma: 0.1 }, chi1MasPerYear: null, chi2MasPerYear: null,
  },
  {
    key: 'isostatic-adjustment', name: 'Glacial isostatic adjustment', core: 'coupled',
    source: 'Kiani Shahvandi et al. (2024), PNAS, e2406930121: −0.80 ± 0.10 ms per century. Its part in the pole’s drift is not entered.',
    lodMsPerCentury: { value: -0.8, sigma: 0.1 }, chi1MasPerYear: null, chi2MasPerYear: null,
  },
]
