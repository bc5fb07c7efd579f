/** The scripts of the pages that a run leads to. */

/** Fetched ahead: a run may end without a connection, and its outcome must show all the same. */
export const fetchRunPages = () => Promise.allSettled(['/runs/under-way/next', '/runs/local/here', '/runs/there'].map(page => preloadRouteComponents(page)))
