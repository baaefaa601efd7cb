import { createRequire } from 'node:module'
import { describe, expect, it } from 'vitest'
import { namesBeyondReport } from '../../../shared/text/reportLetters'

// Held against the font itself: which characters it has pictures of, read by fontkit.
const require = createRequire(import.meta.url)
const { openSync } = createRequire(require.resolve('pdfmake'))('fontkit') as { openSync: (path: string) => { hasGlyphForCodePoint: (code: number) => boolean } }
const font = openSync(require.resolve('@expo-google-fonts/noto-sans/400Regular/NotoSans_400Regular.ttf'))
const printable = (name: string) => [...name].every(letter => font.hasGlyphForCodePoint(letter.codePointAt(0)!))

describe('names that a report cannot print', () => {
  it.each([
    'Zwölf Weiher & <Süd> (2) – “A”', 'Łódź, İzmir, Huế', 'Λίμνη', 'Байкал Ёё', 'नदी', 'O’Higgins № 3', '東の湖', 'カスピ', '한강', 'نهر النيل', 'נהר', 'แม่น้ำ', 'Արաքս', 'মেঘনা', 'Lake 🌊',
  ])('%s', name => expect(namesBeyondReport([name])).toEqual(printable(name) ? [] : [name]))
})
