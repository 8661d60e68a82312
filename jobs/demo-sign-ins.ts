type People = { DEMO_SIGN_INS: readonly { name: string; role: string; email: string; password: string }[] }

// Run by the start script for a demo foundry: nothing here is secret. Named at run time, since the demo foundry may be left out.
const name: string = '@/lib/demo/people'
// oxlint-disable-next-line typescript/no-unsafe-type-assertion -- the module's one door
const { DEMO_SIGN_INS } = (await import(name)) as People
process.send?.({ signIns: DEMO_SIGN_INS })
process.disconnect?.()
