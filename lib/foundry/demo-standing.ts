/** How a foundry stands to the demo data: without any, without and too late for it, with it, or nothing else. */
export type DemoStanding = 'none' | 'has trees' | 'laid over' | 'all demo'
