/** Letters that the report's font has no pictures of: all but Latin, Greek, Cyrillic and Devanagari. */
const beyond = /[^\p{Script=Latin}\p{Script=Greek}\p{Script=Cyrillic}\p{Script=Devanagari}\p{Script=Common}\p{Script=Inherited}]|\p{Extended_Pictographic}/u

/** The names that a report in PDF cannot print whole: their letters come as empty boxes there. */
export function namesBeyondReport(names: readonly string[]): string[] {
  return names.filter(name => beyond.test(name.replace(/[\d#*©®™]/g, '')))
}
