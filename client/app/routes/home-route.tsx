import { useEffect, useState } from 'react'
import { FirstScreen } from '@client/app/first/first-screen'
import { HomeScreen } from '@client/app/first/home-screen'
import { RecordScreen } from '@client/app/first/record-screen'
import { TrialScreen } from '@client/app/first/trial-screen'
import { useStep } from '@client/app/first/use-step'
import { useMe } from '@client/features/account/api'
import { findTrial, useTrial } from '@client/features/trial/trial-store'
import { AppShell } from '@client/ui/app-shell'

export function HomeRoute() {
  const me = useMe()
  const { step } = useStep()
  const trial = useTrial()
  // Whoever signs in while keeping a recording stays on this screen: drawing it again asks anew who is here.
  const [, setCameIn] = useState(0)
  useEffect(() => void findTrial(Date.now()), [])

  const person = me.data && !me.error ? me.data : null
  // A server that does not answer keeps nobody from hearing their own file.
  // Once known it stays known: others on the screen ask again who is here, and would otherwise take it away meanwhile.
  const [isKnown, setKnown] = useState(false)
  if (!isKnown && (person !== null || me.error !== null || me.failureCount > 0)) setKnown(true)
  const needsTrial = step === 'listen' || step === 'keep'
  if (!isKnown || (needsTrial && trial === undefined)) {
    return (
      <AppShell>
        <p role="status" className="px-5 py-8 text-pencil">
          Opening the room
        </p>
      </AppShell>
    )
  }
  if (needsTrial && trial) {
    return (
      <TrialScreen
        trial={trial}
        person={person}
        isKeeping={step === 'keep'}
        onIn={() => setCameIn((times) => times + 1)}
      />
    )
  }
  if (step === 'record') return <RecordScreen key={person?.id ?? 'nobody'} person={person} />
  return person ? <HomeScreen key={person.id} person={person} /> : <FirstScreen />
}
