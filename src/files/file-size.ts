/**
 * In bytes. No file of ours comes near it, and the parser takes a second over a larger one of the worst kind;
 * so what is larger is refused unread.
 */
export const largestFile = 256 * 1024;

export const tooLarge = `larger than ${largestFile / 1024} KiB; is this the right file?`;
