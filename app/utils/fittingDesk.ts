/** Fits and weighs; runs in a worker of its own, since a bootstrap takes tenths of a second and resampling many seconds. */
import { fitCells, type CellsFit } from '#shared/fitting/cell-fits'
import type { BothFits } from '#shared/fitting/fit-both'
import { fitBySettings, type FitSettings } from '#shared/fitting/kept-fit'
import type { FitRefusal } from '#shared/fitting/point-errors'
import type { ExponentialModel } from '#shared/fitting/recovery-model'
import type { ConditionData } from '#shared/recordings/types'

export class FittingDesk {
  both(data: ConditionData, settings: FitSettings): BothFits | FitRefusal {
    return fitBySettings(data, settings)
  }

  cells(data: ConditionData, model: ExponentialModel, freePlateau: boolean): CellsFit | FitRefusal {
    return fitCells(data, { model, freePlateau })
  }
}
