import type { ReactNode } from 'react'
import { Plate } from '@/app/_components/plate'
import { EndKeys } from '@/app/(first-run)/first-run/_components/end-keys'
import { StarterForm } from '@/app/(first-run)/first-run/_components/starter-form'
import { StepFoot } from '@/app/(first-run)/first-run/_components/step-foot'
import { FirstBath, FoundryStep, HoursStep } from '@/app/(first-run)/first-run/_components/step-forms'
import { AddMemberForm } from '@/app/(office)/people/_components/add-member-form'
import { BathRows } from '@/app/(office)/settings/baths/_components/bath-rows'
import { PlaceRows } from '@/app/(office)/settings/places/_components/place-rows'
import { SensorRows } from '@/app/(office)/settings/sensors/_components/sensor-rows'
import '@/app/(office)/settings/settings.css'
import '@/app/(office)/people/people.css'
import { systemClock } from '@/lib/core/clock'
import { foundryFormValues } from '@/lib/foundry/foundry-input'
import { missingFor, type FirstRunStep } from '@/lib/foundry/first-run'
import { timeZones } from '@/lib/foundry/time-zones'
import { loadBathList } from '@/lib/queries/bath-list'
import { loadHoursAndClosedDays } from '@/lib/queries/closed-days'
import type { FirstRun } from '@/lib/queries/first-run'
import { loadFoundrySettings } from '@/lib/queries/foundry-settings'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { loadPeople } from '@/lib/queries/people'
import { loadPlaceList } from '@/lib/queries/place-list'
import { loadSensorList } from '@/lib/queries/sensor-list'
import { STARTER_RECIPES } from '@/lib/recipes/starter-recipes'
import type { Member } from '@/lib/server/auth'

type StepProps = { firstRun: FirstRun; member: Member }

/** What one step asks for. Each saves by the settings' own commands, so that leaving it loses nothing. */
export function StepContent({ step, ...props }: StepProps & { step: FirstRunStep }) {
  const Content = STEPS[step]
  return <Content {...props} />
}

const STEPS: Record<FirstRunStep, (props: StepProps) => ReactNode | Promise<ReactNode>> = {
  foundry: Foundry,
  hours: Hours,
  baths: Baths,
  sensor: SensorStep,
  places: Places,
  recipes: Recipes,
  people: People,
  done: Done,
}

function Head({ title, children }: { title: string; children: ReactNode }) {
  return (
    <div className="page-head">
      <div>
        <h1>{title}</h1>
        <p>{children}</p>
      </div>
    </div>
  )
}

async function Foundry({ firstRun, member }: StepProps) {
  const settings = await loadFoundrySettings()
  const values = foundryFormValues(settings, member.units.temp)
  return (
    <>
      <Head title="Your foundry">
        Its name, where it lies, and its units. The zone is your browser’s guess. Each step is saved as you end it: you can leave, come
        back, and change everything later.
      </Head>
      <FoundryStep
        values={firstRun.reached === 'foundry' ? { ...values, name: '', altitudeM: '' } : values}
        shown={member.units.temp}
        zones={timeZones()}
      />
    </>
  )
}

async function Hours() {
  const { hours } = await loadHoursAndClosedDays({ clock: systemClock })
  return (
    <>
      <Head title="When do you dip?">
        Coats dry round the clock; dips are foreseen in the shifts only. Closed days come later, under Foundry.
      </Head>
      <HoursStep hours={hours} />
    </>
  )
}

async function Baths({ firstRun: { stock } }: StepProps) {
  const [baths, { timeZone }] = await Promise.all([loadBathList(), loadFoundry()])
  const first = stock.faceBaths === 0 ? 'face' : stock.backupBaths === 0 ? 'backup' : null
  return (
    <>
      <Head title="Your baths">At least one for face coats and one for all the others. The floor groups its dips by them.</Head>
      {first !== null && <FirstBath kind={first} />}
      {first === null && <BathRows baths={baths} now={systemClock.now()} timeZone={timeZone} />}
      <StepFoot step="baths" back="hours" missing={missingFor('baths', stock)} />
    </>
  )
}

async function SensorStep({ firstRun: { stock }, member }: StepProps) {
  const [sensors, { timeZone }] = await Promise.all([loadSensorList({ clock: systemClock }), loadFoundry()])
  return (
    <>
      <Head title="What reads the air?">
        A logger sends its readings with a token of its own, which is shown once. Without one, take ‘We read the wall hygrometer’: somebody
        types a reading in at the tablet.
      </Head>
      <SensorRows sensors={sensors} reading={{ now: systemClock.now(), timeZone, units: member.units }} />
      <StepFoot step="sensor" back="baths" missing={missingFor('sensor', stock)} />
    </>
  )
}

async function Places({ firstRun: { stock } }: StepProps) {
  const places = await loadPlaceList({ clock: systemClock })
  return (
    <>
      <Head title="Where do trees hang?">
        Each rack or corner with its own air. Measure the air speed at the tree, with the fans on and off: it decides how fast a coat dries.
      </Head>
      <PlaceRows places={places} />
      <StepFoot step="places" back="sensor" missing={missingFor('places', stock)} />
    </>
  )
}

function Recipes({ firstRun: { recipeNames } }: StepProps) {
  return (
    <>
      <Head title="Recipes to begin with">
        Three recipes for your baths. How long their coats need are starting values, marked ‘not calibrated yet’ wherever a time rests on
        them, until you have checked them against your own first twenty to thirty coats.
      </Head>
      <Plate>
        <StarterForm taken={STARTER_RECIPES.filter(({ name }) => recipeNames.includes(name)).map(({ key }) => key)} />
      </Plate>
    </>
  )
}

async function People() {
  const people = (await loadPeople()).filter(({ disabledAt }) => disabledAt === null)
  return (
    <>
      <Head title="Who works here?">
        Each member gets a first password from you, shown once, and makes their own with it. You can also do this later, under People.
      </Head>
      <Plate title="Members" line={String(people.length)}>
        <ul className="first-people">
          {people.map(({ id, name, role }) => (
            <li key={id}>
              <b>{name}</b> {role}
            </li>
          ))}
        </ul>
      </Plate>
      <Plate title="Add a member" line="they get a first password from you and make their own with it">
        <AddMemberForm />
      </Plate>
      <StepFoot step="people" back="recipes" missing={null} words={people.length > 1 ? 'Go on' : 'Go on alone for now'} />
    </>
  )
}

async function Done({ firstRun: { recipeNames } }: StepProps) {
  const { name } = await loadFoundry()
  return (
    <>
      <Head title={`${name} is ready`}>
        Add the first tree and it shows on the floor as bare wax. Or look at everything with demo data first: it is marked ‘Demo’ wherever
        it shows and goes away again in one step, under Foundry, Upkeep.
      </Head>
      {recipeNames.length === 0 && (
        <p className="text-18">There is no recipe yet, and a tree needs one. Take one in the step before last.</p>
      )}
      <EndKeys canAddTree={recipeNames.length > 0} />
    </>
  )
}
