/** What one sensor, one member or one body may ask of the server. The doors enforce it and the API's description names it. */
export const SENSOR_REQUESTS_PER_MINUTE = 60
export const TEST_PUSHES_PER_MINUTE = 6
export const LARGEST_BODY_BYTES = 64 * 1024
/** 10,000 rows fit in it. */
export const LARGEST_READINGS_BYTES = 2 * 1024 * 1024
