import type { Trial, TuningModel } from '#shared/statistics/tuning.ts'
import { TRIALS_BEFORE_HELP, TUNING_BANDS } from './tamping.ts'
import type { Move, Situation } from './tuning-advice.ts'

/** How many of the last moves are looked at for over-adjustment, and how many of them must answer noise. */
const MOVES_LOOKED_AT = 4
const NOISE_MOVES = 2

/**
 * What a person should know before following the advice: spread, over-adjustment, a last move that did not do what it
 * should, limits, and that the machine's manual comes first.
 */
export function cautionsOn(situation: Situation, move: Move, rsdLimitPercent: number, forecast: TuningModel | undefined): string[] {
  return [
    ...onSpread(situation, rsdLimitPercent),
    ...onOverAdjustment(situation),
    ...onLastMove(situation, forecast),
    ...onMove(situation, move),
    ...onTrials(situation),
    ...onMachine(move),
  ]
}

function onSpread({ last, deviationMg, request }: Situation, rsdLimitPercent: number): string[] {
  const rsd = (100 * last.sdMg) / last.meanMg
  if (rsd <= rsdLimitPercent) return []
  const mean = Math.abs(deviationMg) <= (TUNING_BANDS.donePercent / 100) * request.target ? ' The mean is where it should be.' : ''
  return [
    `The spread is the problem: RSD ${rsd.toFixed(1)} %, limit ${rsdLimitPercent} %. Depth will not cure it; look at flow, bed, speed, pins and ring.${mean}`,
  ]
}

/** Trials after which a setting was changed, with the trial that followed. */
function moves(history: readonly Trial[]): { before: Trial; moved: string[] }[] {
  return history.slice(1).flatMap((trial, place) => {
    const before = history[place]!
    const moved = Object.keys(trial.settings).filter(
      (lever) => before.settings[lever] !== undefined && trial.settings[lever] !== before.settings[lever],
    )
    return moved.length > 0 ? [{ before, moved }] : []
  })
}

function isWithinNoise({ meanMg, sdMg, n }: Trial, target: number): boolean {
  return Math.abs(meanMg - target) <= (2 * sdMg) / Math.sqrt(n)
}

function onOverAdjustment({ request: { history, target } }: Situation): string[] {
  const recent = moves(history).slice(-MOVES_LOOKED_AT)
  const chased = recent.filter(({ before }) => isWithinNoise(before, target)).length
  if (chased >= NOISE_MOVES) {
    return [
      `Over-adjustment: ${chased} of the last ${recent.length} moves chased noise; the sampling alone explains the deviations they answered. Leave it and weigh again.`,
    ]
  }
  const signs = history.slice(-4).map(({ meanMg }) => Math.sign(meanMg - target))
  const swings = signs.length === 4 && recent.length >= 3 && signs.every((sign, place) => place === 0 || sign === -signs[place - 1]!)
  return swings
    ? ['Over-adjustment: the means lie above and below the target in turn, one move overshooting the other. Move by half as much.']
    : []
}

function onLastMove({ request: { history }, last }: Situation, forecast: TuningModel | undefined): string[] {
  const before = history.at(-2)
  if (!before || !forecast) return []
  const moved = Object.keys(last.settings).filter(
    (lever) => before.settings[lever] !== undefined && last.settings[lever] !== before.settings[lever],
  )
  const together =
    moved.length > 1 ? [`${moved.length} settings moved at once, so their effects cannot be told apart. One lever a trial.`] : []
  const { interval } = forecast.predict(last.settings, last)
  if (last.meanMg >= interval[0] && last.meanMg <= interval[1]) return together
  const expected = `${interval[0].toFixed(1)} to ${interval[1].toFixed(1)} mg`
  const why =
    moved.length > 0
      ? 'Compare the scale with the log: a screw may have slipped, or another station was moved.'
      : 'Nothing was moved: look at the event log (blend container, shell lot and tare, speed, stop) before the machine.'
  return [
    ...together,
    `The last mean of ${last.meanMg.toFixed(1)} mg does not fit the earlier trials, which led one to expect ${expected}. ${why}`,
  ]
}

function onMove({ isSettled, request, last }: Situation, move: Move): string[] {
  if (isSettled) {
    const near = Math.abs(last.meanMg - request.target) <= (TUNING_BANDS.donePercent / 100) * request.target
    return [
      near
        ? 'Within ±1 % of the target: leave it.'
        : 'The sampling alone explains the deviation: weigh more capsules before moving anything.',
    ]
  }
  if (!move.isKnown) return [`The effect of ${move.lever} is not known well enough, or it has no step limit: no move is advised.`]
  const lines: string[] = []
  if (move.isCut)
    lines.push(
      `The whole way would be ${Math.abs(move.wanted).toFixed(2)} units; this is as far as one move may go. Weigh before the next.`,
    )
  if (move.to === move.from) lines.push('The move would be smaller than the scale shows: leave it.')
  if (move.atEndOfScale) lines.push(`${move.lever} would stand at the end of its scale: ask the fitter or engineer; the disc may be wrong.`)
  const tried = new Set(request.history.flatMap(({ settings }) => settings[move.lever] ?? [])).size > 1
  if (!tried) lines.push(`${move.lever} has not been moved yet; its slope is a first guess and is learned from this move.`)
  return lines
}

function onTrials({ request: { history }, isSettled }: Situation): string[] {
  if (isSettled || history.length < TRIALS_BEFORE_HELP) return []
  return [`${history.length} trials without reaching the target: ask the fitter or engineer.`]
}

function onMachine({ from, to }: Move): string[] {
  if (from === to) return []
  return [
    'Adjust with the machine stopped and isolated, unless its manual allows adjustment while it runs; the manual and the procedures of the site come first.',
    'Before weighing again let at least six indexes and the way to ejection pass, and give the bed two to five minutes.',
  ]
}
