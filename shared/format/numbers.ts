/** Everything that writes a figure, a place or a date for people. */
export * from './digits.ts'
export * from './measured.ts'
export * from './places.ts'
export * from './dates.ts'
export * from './quantities.ts'
