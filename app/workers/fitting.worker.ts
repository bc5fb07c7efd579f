/** Fits and weighs beside the page. */
import { expose } from 'comlink'
import { FittingDesk } from '../utils/fittingDesk'

expose(new FittingDesk())
