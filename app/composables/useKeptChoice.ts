/** One of a few words that a person chose, kept in a cookie; nothing is written until something is chosen. */
const YEAR_SECONDS = 31_536_000

export function useKeptChoice<Word extends string>(name: string, words: readonly Word[], unchosen: Word) {
  const kept = useCookie<Word | undefined>(name, { maxAge: YEAR_SECONDS, sameSite: 'lax', path: '/' })
  return computed<Word>({
    get: () => kept.value !== undefined && words.includes(kept.value) ? kept.value : unchosen,
    set: (chosen) => { kept.value = chosen },
  })
}
