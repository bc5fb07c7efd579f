/** Name of the channel on which tabs of one browser tell each other who is signed in. */
export const SESSION_CHANNEL = 'moorage-session'
