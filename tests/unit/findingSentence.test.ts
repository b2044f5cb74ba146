import { describe, expect, it } from 'vitest'
import { FACTORS } from '../../server/shared/factors.js'
import { FAULT_TREE } from '../../server/shared/faults/index.js'
import { faultWords, hasFaultWords } from '../../server/shared/sentences/faultWords.js'
import {
  findingCounts,
  findingText,
  howOften,
  lookedAt,
  otherSide,
  plainText,
  qInWords,
  ratioLine,
} from '../../server/shared/sentences/finding.js'
import type { FindingInWords } from '../../server/shared/sentences/finding.js'
import { hasLevelPhrase, levelPhrase } from '../../server/shared/sentences/levelWords.js'

const finding: FindingInWords = {
  fault: 's-crack',
  factor: 'clay_body',
  level: { name: 'Porcelain' },
  pair: null,
  comparison: 'within-firing',
  ratio: 2.24,
  lower: 1.5,
  upper: 3.1,
  qValue: 0.003,
  exposed: { events: 78, units: 912 },
  unexposed: { events: 91, units: 2338 },
  mixedStrata: 41,
  informativeStrata: 30,
  recordedShare: 0.71,
}

describe('findingText', () => {
  it('says how much more often the fault shows, where, and compared with what', () => {
    expect(findingText(finding)).toBe(
      'S-cracks show 2.2 times as often on ware of porcelain, compared with other ware in the same firings.',
    )
  })

  it('says a lowered rate as a percentage', () => {
    expect(findingText({ ...finding, fault: 'crazing', ratio: 0.45 })).toBe(
      'Crazing shows 55 % less often on ware of porcelain, compared with other ware in the same firings.',
    )
  })

  it('says that the fault never showed on the ware in question', () => {
    const none = { ...finding, ratio: 0, exposed: { events: 0, units: 412 } }
    expect(findingText(none)).toBe(
      'S-cracks did not show at all on ware of porcelain, compared with other ware in the same firings.',
    )
  })

  it('says that the fault showed nowhere else', () => {
    expect(findingText({ ...finding, fault: 'joint-crack', ratio: null })).toBe(
      'Joints and seams cracked only on ware of porcelain, never on other ware in the same firings.',
    )
  })

  it('names both sides of a glaze and clay body pair', () => {
    const pair = { factor: 'clay_body', level: { name: 'White stoneware' } }
    expect(
      findingText({
        ...finding,
        fault: 'crazing',
        factor: 'glaze',
        level: { name: 'Celadon' },
        pair,
        ratio: 5.1,
      }),
    ).toBe(
      'Crazing shows 5.1 times as often on ware of white stoneware glazed with celadon, compared with other ware in the same firings.',
    )
  })

  it('compares a kiln with other firings of the same studio and kind', () => {
    const kiln = {
      ...finding,
      factor: 'kiln',
      level: { name: 'North' },
      comparison: 'between-firings' as const,
    }
    expect(findingText(kiln)).toBe(
      'S-cracks show 2.2 times as often in kiln North, compared with other firings of the same studio and kind.',
    )
    expect(findingText({ ...kiln, ratio: null })).toMatch(
      /only in kiln North, never on ware of other firings of/,
    )
  })

  it('speaks of every fault in words of its own and never of causes', () => {
    expect(FAULT_TREE.filter(({ id }) => !hasFaultWords(id))).toEqual([])
    const texts = FAULT_TREE.map(({ id }) => findingText({ ...finding, fault: id }))
    expect(new Set(texts).size).toBe(FAULT_TREE.length)
    for (const text of texts) expect(text).not.toMatch(/caus|because|due to/i)
  })

  it('matches the verb to its subject', () => {
    for (const { id } of FAULT_TREE) {
      const { subject, present } = faultWords(id)
      const isMass =
        /^(Crazing|Late crazing|Crawling|Too thick a glaze|Underfired or dry glaze)$/.test(subject)
      expect(`${subject} ${present}`).toMatch(isMass ? / shows$/ : / (show|crack|come off)$/)
    }
  })
})

describe('howOften', () => {
  it.each([
    [1.04, '4 % more often'],
    [1.001, '1 % more often'],
    [1.46, '1.5 times as often'],
    [2.02, 'twice as often'],
    [12.6, '13 times as often'],
    [0.5, '50 % less often'],
    [0.001, '99 % less often'],
  ])('says %d as "%s"', (ratio, words) => {
    expect(howOften(ratio)).toBe(words)
  })
})

describe('levelPhrase', () => {
  it('has a phrase for the levels of every factor of the registry', () => {
    expect(FACTORS.filter(({ id }) => !hasLevelPhrase(id))).toEqual([])
  })

  it('reads on where the name of a practice does, and quotes it where not', () => {
    expect(levelPhrase('drying_practice', 'Under loose plastic')).toBe(
      'on ware dried under loose plastic',
    )
    expect(levelPhrase('drying_practice', 'slowly, covered')).toBe('on ware dried slowly, covered')
    expect(levelPhrase('drying_practice', 'Open shelf')).toBe('on ware dried “open shelf”')
    expect(levelPhrase('joining_practice', 'Slip only')).toBe('on ware joined “slip only”')
  })

  it.each([
    ['forming', 'slab', 'on slab ware'],
    ['forming', 'mixed', 'on ware made in more than one way'],
    ['thickness_band', 'over 15 mm', 'on ware over 15 mm thick'],
    ['days_dried', 'under 3 days', 'on ware dried for under 3 days'],
    ['shelf', 'top', 'on the top shelf'],
    ['glaze_sides', 'inside only', 'on ware glazed inside only'],
    ['opening_temperature', 'under 60 °C', 'in firings opened under 60 °C'],
    ['opening_temperature', '200 °C and over', 'in firings opened at 200 °C and over'],
    ['kiln', 'Kiln 2', 'in Kiln 2'],
    ['cooling', 'fan', 'in firings cooled with a fan'],
    ['class', 'Tuesday evening', 'on ware from class “Tuesday evening”'],
    ['clay_body', 'BM7', 'on ware of BM7'],
  ])('says %s %s as "%s"', (factor, level, phrase) => {
    expect(levelPhrase(factor, level)).toBe(phrase)
  })

  it('still says something for a factor that is new to the registry', () => {
    expect(levelPhrase('water', 'rain')).toBe('on ware with water “rain”')
  })
})

describe('counts and sureness', () => {
  it('gives the counts of the firings that held both', () => {
    expect(plainText(findingCounts(finding))).toBe(
      'In the 41 firings that held both: 78 of 912 pieces against 91 of 2,338.',
    )
    expect(
      findingCounts(finding)
        .filter(({ strong }) => strong)
        .map(({ text }) => text),
    ).toEqual(['78 of 912', '91 of 2,338'])
  })

  it('says that a comparison between firings is the weaker one', () => {
    expect(plainText(findingCounts({ ...finding, comparison: 'between-firings' }))).toBe(
      '78 of 912 pieces against 91 of 2,338. Compared between firings: weaker, for 30 firings may differ in more than this.',
    )
  })

  it('speaks of one firing and one piece in the singular', () => {
    const one = { ...finding, mixedStrata: 1, exposed: { events: 1, units: 1 } }
    expect(plainText(findingCounts(one))).toBe(
      'In the 1 firing that held both: 1 of 1 piece against 91 of 2,338.',
    )
  })

  it('gives the ratio with its interval and q', () => {
    expect(ratioLine(finding)).toBe('2.2 (1.5 to 3.1), q 0.003')
    expect(ratioLine({ ...finding, lower: null, upper: null, qValue: 0.00001 })).toBe(
      '2.2, q under 0.001',
    )
    expect(ratioLine({ ...finding, ratio: 0, lower: null, upper: null })).toBe('0, q 0.003')
    expect(ratioLine({ ...finding, ratio: null, lower: null, upper: null, qValue: 0.04 })).toBe(
      'no ratio, q 0.04',
    )
  })

  it.each([
    [0.1, '1 in 10'],
    [0.07, '1 in 14'],
    [0.003, '1 in 330'],
    [0, '1 in 1,000'],
  ])('says q %d as about %s', (q, words) => {
    expect(qInWords(q)).toBe(`Of findings as sure as this one, about ${words} or fewer is luck.`)
  })

  it('says how many comparisons were made and how much was not recorded', () => {
    expect(lookedAt(214, { ...finding, factor: 'drying_practice' })).toBe(
      'One of 214 comparisons made that night. Drying practice was not recorded for 29 % of pieces.',
    )
    expect(lookedAt(1, { ...finding, recordedShare: 1 })).toBe(
      'The only comparison made that night. Clay body was recorded for all pieces.',
    )
  })

  it('names the other side of the comparison', () => {
    expect(otherSide({ factor: 'drying_practice', pair: null })).toBe('every other drying practice')
    expect(
      otherSide({ factor: 'glaze', pair: { factor: 'clay_body', level: { name: 'white' } } }),
    ).toBe('every other pair of glaze and clay body')
  })
})
