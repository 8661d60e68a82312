import { DEMO_SIGN_INS, type DemoSignIn } from '@/lib/demo/people'
import { Foundry, Member } from '@/models'

/** The demo foundry's sign-ins that still work; none in a foundry of one's own, or before there is one. */
export async function loadDemoSignIns(): Promise<DemoSignIn[]> {
  const foundry = await Foundry.findByPk(1)
  if (!foundry?.isDemo) return []
  const members = await Member.findAll({ where: { email: DEMO_SIGN_INS.map(({ email }) => email) } })
  const inUse = new Set(members.filter((member) => member.disabledAt === null).map((member) => member.email))
  return DEMO_SIGN_INS.filter(({ email }) => inUse.has(email))
}
