// Stand-in until the people and the foundry are stored.
export async function loadSignIn(): Promise<{
  foundryName: string
  demoSignIns: { name: string; role: string; email: string; password: string }[]
}> {
  return {
    foundryName: 'Marram Lane Art Foundry',
    demoSignIns: [
      { name: 'Ines', role: 'supervisor', email: 'ines@marramlane.example', password: 'otter-gate-panel-two' },
      { name: 'Maud', role: 'operator', email: 'maud@marramlane.example', password: 'swimmer-at-rest-six' },
    ],
  }
}
