/** Names of cookies and headers that both ends must spell alike. */
export const ACCESS_COOKIE = 'sidewash_access';
export const REFRESH_COOKIE = 'sidewash_refresh';
/** Who joined a class as a guest, without an account. */
export const GUEST_COOKIE = 'sidewash_guest';
/** Readable by the page; its value goes back in {@link CSRF_HEADER} with every data-changing request. */
export const CSRF_COOKIE = 'sidewash_csrf';
export const CSRF_HEADER = 'x-sidewash-csrf';
/** Hash of the chunk in the body, chained to its predecessor: 16 lower-case hex digits. */
export const CHUNK_HASH_HEADER = 'x-chunk-hash';
export const REQUEST_ID_HEADER = 'x-request-id';
export const PROBLEM_MEDIA_TYPE = 'application/problem+json';
