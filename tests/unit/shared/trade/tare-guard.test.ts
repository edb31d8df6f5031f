import { expect, test } from 'vitest'
import { tareGuard } from '#shared/trade/tare-guard.ts'

// Trade knowledge: size 0, 400 mg at 2 % RSD with shell SD 2.5 looks 5 % wider; r 0.46 +10 %, r 0.75 +25 %.
test.each([
  [0.32, 5],
  [0.46, 10],
  [0.75, 25],
])('a ratio of %d makes the SD look about %d %% larger', (ratio, percent) => {
  const { inflationPercent } = tareGuard({ shellSdMg: 8 * ratio, shellMeanMg: 96, fillSdMg: 8, fillMg: 400 })
  expect(Math.round(inflationPercent)).toBe(percent)
})

test.each([
  [{ shellSdMg: 2.39, fillSdMg: 8, fillMg: 400 }, 'mean-tare'],
  [{ shellSdMg: 2.4, fillSdMg: 8, fillMg: 400 }, 'show-both'],
  [{ shellSdMg: 6, fillSdMg: 8, fillMg: 400 }, 'show-both'],
  [{ shellSdMg: 6.01, fillSdMg: 8, fillMg: 400 }, 'individual-tare'],
  [{ shellSdMg: 0.1, fillSdMg: 8, fillMg: 95 }, 'individual-tare'],
  [{ shellSdMg: 0.1, fillSdMg: 8, fillMg: 96 }, 'mean-tare'],
] as const)('%j advises %s', (weights, advice) => {
  expect(tareGuard({ ...weights, shellMeanMg: 96 }).advice).toBe(advice)
})

test.each([0, -1, NaN])('a fill SD of %d is refused', (fillSdMg) => {
  expect(() => tareGuard({ shellSdMg: 1, shellMeanMg: 96, fillSdMg, fillMg: 400 })).toThrow()
})
