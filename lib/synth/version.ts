/** Names the arithmetic: raised by any change that moves one bit of an output; golden digests hold it. */
export const synthVersion = 2;
