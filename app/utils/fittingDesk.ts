/** Fits and weighs; runs in a worker of its own, since a bootstrap takes tenths of a second and resampling many seconds. */
import { fitCells, type CellsFit } from '#shared/fitting/cell-fits'
import type { BothFits } from '#shared/fitting/fit-both'
import { fitBySettings, type FitSettings } from '#shared/fitting/kept-fit'
import type { FitRefusal } from '#shared/fitting/point-errors'
import type { ExponentialModel } from '#shared/fitting/recovery-model'
import { growthSteps } from '#shared/fitting/weighing/growth'
import { sensitivitySteps } from '#shared/fitting/weighing/sensitivity'
import { weighUpSteps, type WeighProgress } from '#shared/fitting/weighing/weigh-up'
import type { ConditionData } from '#shared/recordings/types'
import type { WeighGrowth, WeighSensitivity, WeighSettings, WeighUp } from '#shared/schemas/weigh-up'

const REPORT_EVERY_MS = 100
/** Goes through all steps at once. */
function lastOf<Result>(steps: Generator<unknown, Result>): Result {
  for (;;) {
    const step = steps.next()
    if (step.done) return step.value
  }
}

export class FittingDesk {
  both(data: ConditionData, settings: FitSettings): BothFits | FitRefusal {
    return fitBySettings(data, settings)
  }

  /** Stops where the report answers false; then the answer is null. */
  async weigh(conditions: ConditionData[], settings: WeighSettings, report: (progress: WeighProgress) => boolean | Promise<boolean>): Promise<WeighUp | FitRefusal | null> {
    const steps = weighUpSteps({ conditions, settings })
    let heard = 0
    for (let step = steps.next(); ; step = steps.next()) {
      if (step.done) return step.value
      // A message for each of hundreds of resamples would cost more than it says.
      const now = performance.now()
      if (now - heard < REPORT_EVERY_MS) continue
      heard = now
      if (!await report(step.value)) return null
    }
  }

  /** How the verdict grew with the conditions. */
  growth(conditions: ConditionData[], settings: WeighSettings): WeighGrowth {
    return lastOf(growthSteps({ conditions, settings }))
  }

  /** The verdict under other depletions and unequal emptying. */
  sensitivity(conditions: ConditionData[], settings: WeighSettings): WeighSensitivity | FitRefusal {
    return lastOf(sensitivitySteps({ conditions, settings }))
  }

  cells(data: ConditionData, model: ExponentialModel, freePlateau: boolean): CellsFit | FitRefusal {
    return fitCells(data, { model, freePlateau })
  }
}
