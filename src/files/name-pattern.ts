/** What may become the name of a folder: 1 to 64 letters, digits, `.`, `_`, `-`, not starting with a dot. */
export const namePattern = /^(?!\.)[A-Za-z0-9._-]{1,64}$/;
