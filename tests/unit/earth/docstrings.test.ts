import { readdirSync, readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { expect, it } from 'vitest'

const folder = fileURLToPath(new URL('../../../shared/earth/', import.meta.url))

it('every function that the core exports has a docstring', () => {
  const bare: string[] = []
  let functions = 0
  for (const file of readdirSync(folder, { recursive: true, encoding: 'utf8' }).filter(name => name.endsWith('.ts'))) {
    const lines = readFileSync(folder + file, 'utf8').split('\n')
    lines.forEach((line, i) => {
      const name = /^export (?:async )?function (\w+)/.exec(line)?.[1]
      if (!name) return
      functions++
      if (!/\*\/\s*$/.test(lines[i - 1] ?? '')) bare.push(`${file}: ${name}`)
    })
  }
  expect(functions).toBeGreaterThan(80)
  expect(bare).toEqual([])
})

it('the core imports nothing from pages or server, and keeps no state of its own', () => {
  for (const file of readdirSync(folder, { recursive: true, encoding: 'utf8' }).filter(name => name.endsWith('.ts'))) {
    const text = readFileSync(folder + file, 'utf8')
    expect(text, file).not.toMatch(/from '(?:node:|#|~|.*\/(?:app|server)\/)/)
    expect(text, file).not.toMatch(/^(?:export )?(?:let|var) /m)
  }
})
