import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { CanonicalJsonError, canonicalJson, digestOf, parseCanonicalJson, parseStrictJson } from '#shared/record/canonicalJson'

const codeOf = (run: () => unknown) => {
  try {
    run()
  }
  catch (error) {
    if (error instanceof CanonicalJsonError) return error.code
    throw error
  }
  return 'taken'
}

describe('canonical JSON refuses', () => {
  it.each([
    ['NaN', NaN, 'notFinite'],
    ['infinity', { a: [Infinity] }, 'notFinite'],
    ['whole numbers past 2^53', 2 ** 53, 'numberTooLarge'],
    ['half a surrogate pair in a text', '\ud800x', 'loneSurrogate'],
    ['half a surrogate pair in a key', { '\udc00': 1 }, 'loneSurrogate'],
    ['undefined in an object, which JSON would leave out', { a: undefined }, 'notPlain'],
    ['undefined in a list, which JSON would write as null', [undefined], 'notPlain'],
    ['a hole in a list', Array(1), 'notPlain'],
    ['dates', new Date(0), 'notPlain'],
    ['maps', new Map(), 'notPlain'],
    ['functions', { toJSON: () => 1 }, 'notPlain'],
    ['big integers', 1n, 'notPlain'],
  ])('%s', (_name, value, code) => expect(codeOf(() => canonicalJson(value))).toBe(code))
  it('a circle, as too deep', () => {
    const circle: unknown[] = []
    circle.push(circle)
    expect(codeOf(() => canonicalJson(circle))).toBe('tooDeep')
  })
  it('and says where', () => expect(() => canonicalJson({ a: [{ b: NaN }] })).toThrow('/a/0/b'))
})

describe('strict reading', () => {
  it.each([
    ['{"a":1,"a":1}', 'duplicateKey'],
    ['{"a":1,"\\u0061":2}', 'duplicateKey'],
    ['9007199254740992', 'numberTooLarge'],
    ['-9007199254740993', 'numberTooLarge'],
    ['1e999', 'notFinite'],
    ['"\\ud800"', 'loneSurrogate'],
    ['[1,]', 'notJson'], ['{,}', 'notJson'], ['01', 'notJson'], ['+1', 'notJson'], ['.5', 'notJson'], ['NaN', 'notJson'], ['\'a\'', 'notJson'],
    ['"\t"', 'notJson'], ['"\\x41"', 'notJson'], ['nullx', 'notJson'], ['1 2', 'notJson'], ['', 'notJson'], ['\ufeff1', 'notJson'], ['\u00a01', 'notJson'],
    ['['.repeat(200) + ']'.repeat(200), 'tooDeep'],
  ])('%s is refused: %s', (text, code) => expect(codeOf(() => parseStrictJson(text))).toBe(code))
  it('keeps a key named __proto__ as a key', () => {
    const value = parseStrictJson('{"__proto__":{"x":1}}') as object
    expect(Object.keys(value)).toEqual(['__proto__'])
    expect(canonicalJson(value)).toBe('{"__proto__":{"x":1}}')
  })
  it('agrees with JSON.parse on whatever JSON.stringify writes, spaced or not', () => {
    fc.assert(fc.property(fc.jsonValue(), fc.integer({ min: 0, max: 3 }), (value, indent) => {
      const text = JSON.stringify(value, null, indent)
      if (codeOf(() => canonicalJson(value)) !== 'taken') return
      expect(parseStrictJson(text)).toEqual(JSON.parse(text))
    }))
  })
  it('takes a canonical text back unchanged and refuses other spellings of it', () => {
    expect(parseCanonicalJson('{"a":1,"b":[]}')).toEqual({ a: 1, b: [] })
    expect(codeOf(() => parseCanonicalJson('{"b":[],"a":1}'))).toBe('notCanonical')
    expect(codeOf(() => parseCanonicalJson('{"a": 1,"b":[]}'))).toBe('notCanonical')
    expect(codeOf(() => parseCanonicalJson('{"a":1.0,"b":[]}'))).toBe('notCanonical')
  })
  it('gives one digest whatever the order of keys', () => {
    expect(digestOf({ b: 1, a: { d: 2, c: 3 } })).toBe(digestOf({ a: { c: 3, d: 2 }, b: 1 }))
    // By hand: printf '{"a":1}' | sha256sum
    expect(digestOf({ a: 1 })).toBe('015abd7f5cc57a2dd94b7590f04ad8084273905ee33ec5cebeae62276a97f862')
  })
})
