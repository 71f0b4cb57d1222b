/** Names the pack's layout and texts; raised with any change of a byte that the inputs do not ask for. Part of the packKey. */
export const packVersion = '3';
