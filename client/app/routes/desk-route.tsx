import { useParams } from 'react-router-dom'
import { Desk } from '@client/app/desk/desk'

export function DeskRoute() {
  const { takeId = '' } = useParams()
  return <Desk key={takeId} takeId={takeId} />
}
