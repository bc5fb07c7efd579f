/** Makes outcomes and request bodies from replicate blocks beside the page: resampling and digests would hold it up for longer than 50 ms. */
import { expose } from 'comlink'
import { OutcomeDesk } from '../utils/outcomeDesk'

expose(new OutcomeDesk())
