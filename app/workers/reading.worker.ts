/** Reads a file beside the page: a table of 20 MB would hold the page for seconds. */
import { expose } from 'comlink'
import { FileReadingDesk } from '../utils/fileReadingDesk'

expose(new FileReadingDesk())
