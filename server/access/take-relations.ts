// From how a person stands to a take to their relations. The one place that reads a take's reach.
import type { Relation } from '@shared/access/relations'
import type { TakeStanding } from '@server/repositories/access.repo'

/** A uploader who left the group keeps nothing; a person outside the group has no relation whatever the reach says. */
export const takeRelations = (standing: TakeStanding): Set<Relation> => {
  const held = new Set<Relation>(['stranger'])
  const { role, reach } = standing
  if (role === null) return held
  held.add(role)
  if (standing.isUploader) return held.add('takeOwner')
  if (reach === 'only me') return held
  // "People I name" means just those: a teacher is named like anybody else.
  const isTeaching = role === 'teacher' || role === 'owner'
  if (standing.isLinkedTeacher && isTeaching && reach !== 'named') held.add('takeOwnersTeacher')
  if (reach === 'my teachers') return held
  if (standing.isNamed) held.add(role === 'listener' ? 'namedListener' : 'namedMember')
  if (reach === 'group') {
    if (role !== 'listener') held.add('hearer')
    // Listeners hear takes of minors only by name.
    else if (!standing.isUploaderMinor) held.add('guestHearer')
  }
  return held
}
