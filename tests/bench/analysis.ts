import { spawnSync } from 'node:child_process'
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { controlFactors } from '#shared/statistics/control-factors.ts'
import { analyse, analyseWithShape, type Figures } from './analysis/ours.ts'
import { drawWeights, SPECIFICATION, SUBGROUP_SIZE, yardstick } from './analysis/weights.ts'

/** One line of the bench: a ratio of two times measured in the same minute, and what it has to be. */
export interface BenchRow {
  name: string
  ratio: number
  target: number
  /** Whether the ratio is to be at most or at least the target. */
  wanted: 'at most' | 'at least'
  meets: boolean
  /** The two times behind the ratio, ms: numerator, denominator. */
  milliseconds: [number, number]
}

/** What another program found, and how long it took without starting up and reading the file. */
interface Other {
  milliseconds: number
  figures: Figures
}

const ROUNDS = 40
const SORT_ROUNDS = 10
const OTHER_ROUNDS = 15

/**
 * The analysis of a million weights against the yardstick and against what is installed of R and NumPy. Best of several
 * rounds, ours and the yardstick in turn, so that both meet the same machine. Every program must find the same figures.
 */
export function analysisBench(): BenchRow[] {
  const weights = drawWeights()
  const [yard = NaN, analysis = NaN] = bestOf(ROUNDS, [() => yardstick(weights), () => analyse(weights)])
  const [sort = NaN, withShape = NaN] = bestOf(SORT_ROUNDS, [() => weights.slice().sort(), () => analyseWithShape(weights)])
  const name = 'Analysis of 1,000,000 weights in 100,000 subgroups'
  const rows = [
    row(`${name}, in yardsticks`, analysis, yard, 5, 'at most'),
    row(`${name} with normality and percentiles, in sorts of the same array`, withShape, sort, 1.5, 'at most'),
  ]
  const figures = analyse(weights)
  for (const competitor of competitors()) {
    const other = compete(competitor, weights)
    if (!other) continue
    requireSameFigures(competitor.title, figures, other.figures)
    rows.push(row(`${name}: time of ${competitor.title}, in ours`, other.milliseconds, analysis, competitor.target, 'at least'))
  }
  return rows
}

function row(name: string, numerator: number, denominator: number, target: number, wanted: BenchRow['wanted']): BenchRow {
  const ratio = numerator / denominator
  return {
    name,
    ratio,
    target,
    wanted,
    meets: wanted === 'at most' ? ratio <= target : ratio >= target,
    milliseconds: [numerator, denominator],
  }
}

/** The shortest time of each work, ms. They take turns, so that all meet the same machine. */
function bestOf(rounds: number, works: readonly (() => unknown)[]): number[] {
  const best = works.map(() => Infinity)
  for (let round = 0; round < rounds; round++) {
    works.forEach((work, i) => {
      best[i] = Math.min(best[i] ?? Infinity, millisecondsOf(work))
    })
  }
  return best
}

function millisecondsOf(work: () => unknown): number {
  const started = performance.now()
  work()
  return performance.now() - started
}

/** A program that may be installed: how to ask whether it can do the job, and what it runs. */
interface Competitor {
  title: string
  target: number
  programs: readonly string[]
  probe: readonly string[]
  script: string
  given: readonly string[]
}

function competitors(): Competitor[] {
  const { d2, d3, c4 } = controlFactors(SUBGROUP_SIZE)
  const given = { n: SUBGROUP_SIZE, d2, d3, c4, lower: SPECIFICATION.lower, upper: SPECIFICATION.upper }
  const inR = (more: object): string[] => Object.entries({ ...given, ...more }).map(([key, value]) => `${key}=${String(value)}`)
  const numpy = { programs: ['python3', '/usr/bin/python3'], probe: ['-c', 'import numpy'], script: 'with-numpy.py' }
  const baseR = { programs: ['Rscript'], probe: ['--version'], script: 'with-base.R' }
  return [
    { title: 'NumPy, vectorised', target: 1, ...numpy, given: [JSON.stringify({ ...given, rounds: OTHER_ROUNDS })] },
    { title: 'base R as it is usually written', target: 10, ...baseR, given: inR({ rounds: 2, style: 'apply' }) },
    { title: 'base R vectorised by hand', target: 2, ...baseR, given: inR({ rounds: OTHER_ROUNDS, style: 'columns' }) },
  ]
}

/** Hands the weights to a program as a file of doubles. */
function withFile<T>(weights: Float64Array, use: (file: string) => T): T {
  const folder = mkdtempSync(join(tmpdir(), 'weights-'))
  try {
    const file = join(folder, 'weights.f64')
    writeFileSync(file, new Uint8Array(weights.buffer))
    return use(file)
  } finally {
    rmSync(folder, { recursive: true })
  }
}

/** Runs a script by the first of its programs that can do the job; undefined when none is installed. A script that fails is an error. */
function compete({ title, programs, probe, script, given }: Competitor, weights: Float64Array): Other | undefined {
  const program = programs.find((each) => spawnSync(each, probe).status === 0)
  if (program === undefined) return undefined
  const path = fileURLToPath(new URL(`./analysis/${script}`, import.meta.url))
  const { status, stdout, stderr } = withFile(weights, (file) =>
    spawnSync(program, [path, file, ...given], { encoding: 'utf8', timeout: 300_000 }),
  )
  if (status !== 0) throw new Error(`${title} failed: ${stderr}`)
  // What the script prints is checked figure by figure against our own.
  return JSON.parse(stdout) as Other
}

function requireSameFigures(title: string, ours: Figures, theirs: Figures): void {
  const isSame =
    ours.signals === theirs.signals &&
    (
      [
        ['mean', 1e-12],
        ['cpk', 1e-9],
        ['ppk', 1e-9],
      ] as const
    ).every(([figure, allowed]) => Math.abs(theirs[figure] / ours[figure] - 1) <= allowed)
  if (!isSame) throw new Error(`${title} finds ${JSON.stringify(theirs)}, we find ${JSON.stringify(ours)}.`)
}
