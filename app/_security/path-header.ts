/** Request header in which the proxy tells a page its own address, so that a signed-out visitor can come back to it. */
export const PATH_HEADER = 'x-motebook-path';
