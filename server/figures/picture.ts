/** Lists draw the picture 144 × 36 px, Choose a start 144 × 42: two pixels a column, and rows that stay whole. */
export const PICTURE_COLUMNS = 72;
export const PICTURE_ROWS = 18;
