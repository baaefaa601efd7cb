/**
 * Certified regressions of polynomials, NIST Statistical Reference Datasets, www.itl.nist.gov/div898/strd/lls/lls.shtml: data and certified
 * values as published there, computed by NIST with 500 digits.
 */
export const pontius = {
  source: 'Pontius, load cell calibration: quadratic, lower to average difficulty',
  x: [1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12, 13, 14, 15, 16, 17, 18, 19, 20, 1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12, 13, 14, 15, 16, 17, 18, 19, 20].map(i => 150_000 * i),
  y: [
    .11019, .21956, .32949, .43899, .54803, .65694, .76562, .87487, .98292, 1.09146, 1.20001, 1.30822, 1.41599, 1.52399, 1.63194, 1.73947, 1.84646, 1.95392, 2.06128, 2.16844,
    .11052, .22018, .32939, .43886, .54798, .65739, .76596, .87474, .98300, 1.09150, 1.20004, 1.30818, 1.41613, 1.52408, 1.63159, 1.73965, 1.84696, 1.95445, 2.06177, 2.16829
  ],
  coefficients: [0.673565789473684e-3, 0.732059160401003e-6, -0.316081871345029e-14],
  sigma: [0.107938612033077e-3, 0.157817399981659e-9, 0.486652849992036e-16]
}

const fifth = [1, 1, 1, 1, 1, 1]
const sigma3 = [2152.32624678170, 2363.55173469681, 779.343524331583, 101.475507550350, 5.64566512170752, 0.112324854679312]

/** Wampler (1970), J. Am. Stat. Assoc. 65, 549: polynomials of degree 5 at x = 0 … 20, of higher difficulty. */
export const wampler = [
  {
    source: 'Wampler 1: a polynomial of ones, exact',
    y: [1, 6, 63, 364, 1365, 3906, 9331, 19608, 37449, 66430, 111111, 177156, 271453, 402234, 579195, 813616, 1118481, 1508598, 2000719, 2613660, 3368421],
    coefficients: fifth, sigma: [0, 0, 0, 0, 0, 0], digits: 8
  },
  {
    source: 'Wampler 2: coefficients from 1 to 1e-5, exact',
    y: [
      1, 1.11111, 1.24992, 1.42753, 1.65984, 1.96875, 2.38336, 2.94117, 3.68928, 4.68559, 6, 7.71561, 9.92992, 12.75603, 16.32384, 20.78125, 26.29536, 33.05367, 41.26528,
      51.16209, 63
    ],
    coefficients: [1, 1e-1, 1e-2, 1e-3, 1e-4, 1e-5], sigma: [0, 0, 0, 0, 0, 0], digits: 12
  },
  {
    source: 'Wampler 3: ones, with errors',
    y: [760, -2042, 2111, -1684, 3888, 1858, 11379, 17560, 39287, 64382, 113159, 175108, 273291, 400186, 581243, 811568, 1121004, 1506550, 2002767, 2611612, 3369180],
    coefficients: fifth, sigma: sigma3, digits: 8
  },
  {
    source: 'Wampler 4: ones, with a hundred times the errors',
    y: [
      75901, -204794, 204863, -204436, 253665, -200894, 214131, -185192, 221249, -138370, 315911, -27644, 455253, 197434, 783995, 608816, 1370781, 1303798, 2205519, 2408860, 3444321
    ],
    coefficients: fifth, sigma: sigma3.map(s => 100 * s), digits: 7
  },
  {
    source: 'Wampler 5: ones, with ten thousand times the errors',
    y: [
      7590001, -20479994, 20480063, -20479636, 25231365, -20476094, 20489331, -20460392, 18417449, -20413570, 20591111, -20302844, 18651453, -20077766, 21059195, -19666384,
      26348481, -18971402, 22480719, -17866340, 10958421
    ],
    coefficients: fifth, sigma: sigma3.map(s => 1e4 * s), digits: 5
  }
]
