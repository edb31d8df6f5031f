import { parentPort } from 'node:worker_threads'
import { StatisticsError } from '#shared/statistics/errors.ts'
import { comparePlans, operatingCharacteristic } from '#shared/statistics/operating-characteristic.ts'
import { passBound } from '#shared/statistics/pass-bound.ts'
import { averageRunLength } from '#shared/statistics/run-length.ts'
import { chanceOfPassing } from '#shared/trade/standards/chance-of-passing.ts'
import { adviseTuning } from '#shared/trade/tuning-advice.ts'
import type { SimulationReply, SimulationResults, SimulationTask } from './simulation-task.ts'

function run(task: SimulationTask): SimulationResults[SimulationTask['kind']] {
  switch (task.kind) {
    case 'run-length':
      return averageRunLength(task.request)
    case 'chance-of-passing':
      return chanceOfPassing(task.request)
    case 'pass-bound':
      return passBound(task.sample, task.size)
    case 'operating-characteristic':
      return operatingCharacteristic(task.plan, task.changes)
    case 'tuning':
      return adviseTuning(task.request)
    case 'compare-plans':
      return comparePlans(task.plan, task.change, task.options)
  }
}

function replyTo(task: SimulationTask): SimulationReply {
  try {
    return { result: run(task) }
  } catch (error) {
    // An error loses its class on the way between threads, so what it says is sent in its place.
    if (error instanceof StatisticsError) return { refused: { code: error.code, argument: error.argument, message: error.message } }
    throw error
  }
}

parentPort?.on('message', (task: SimulationTask) => parentPort?.postMessage(replyTo(task)))
