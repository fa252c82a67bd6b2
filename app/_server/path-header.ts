/** Written by the proxy, so that a page knows its own address. */
export const PATH_HEADER = "x-tidemark-path";
