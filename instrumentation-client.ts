// Runs in the browser before any other code of a page. zod compiles schemas from text where it may and tries so at first;
// the content policy forbids it and would report each try. This is where zod keeps what its `config` sets: importing that
// would bring zod to pages that do without.
Object.assign(globalThis, { __zod_globalConfig: { jitless: true } })
