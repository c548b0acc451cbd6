// Row shapes, told to Knex so that a wrong column does not compile.
import type { Role } from '@shared/contracts/common'
import type { Clip, ClipSettings } from '@shared/contracts/clips'
import type { CommentKind } from '@shared/contracts/comments'
import type { GroupEventType } from '@shared/contracts/group-events'
import type { TransportState } from '@shared/contracts/sessions'
import type { Reach } from '@shared/contracts/takes'
import type { SpeedLadder } from '@shared/practice/ladder'

export interface UserRow {
  id: string
  name: string
  email: string
  email_key: string
  password_hash: string
  is_operator: boolean
  is_minor: boolean
  guardian_name: string | null
  guardian_consent_at: Date | null
  tap_lag_ms: number | null
  /** Read through readPreferences only. */
  preferences: object
  disabled_at: Date | null
  created_at: Date
  updated_at: Date
}
export interface SignInRow {
  sid: string
  sess: object
  expire: Date
}
export interface GroupRow {
  id: string
  name: string
  is_roster_shown: boolean
  last_seq: number
  created_at: Date
  updated_at: Date
}
export interface MembershipRow {
  group_id: string
  user_id: string
  role: Role
  created_at: Date
}
export interface TeacherLinkRow {
  id: string
  group_id: string
  teacher_id: string
  student_id: string
  teacher_agreed_at: Date | null
  student_agreed_at: Date | null
  created_at: Date
}
export interface InvitationRow {
  id: string
  group_id: string
  role: Role
  note: string
  token_hash: Buffer
  created_by: string
  created_at: Date
  expires_at: Date
  used_at: Date | null
  used_by: string | null
  revoked_at: Date | null
}
export interface EventRow {
  group_id: string
  seq: number
  type: GroupEventType
  object_id: string | null
  take_id: string | null
  actor_id: string | null
  created_at: Date
}
export interface AuditRow {
  id: number
  at: Date
  what: string
  actor_id: string | null
  object_id: string | null
  group_id: string | null
  address: string | null
  request_id: string | null
}
export interface TuneRow {
  id: string
  group_id: string
  title: string
  created_by: string | null
  created_at: Date
  updated_at: Date
}
export interface TakeRow {
  id: string
  group_id: string
  tune_id: string | null
  uploader_id: string
  /** The take it was played over. */
  over_take_id: string | null
  title: string
  reach: Reach
  agreed_at: Date
  state: 'waiting' | 'working' | 'ready' | 'failed'
  stage: string | null
  progress: number
  fault: string | null
  duration_sec: number | null
  sample_rate: number | null
  channels: number | null
  loudness_lufs: number | null
  true_peak_db: number | null
  gain_db: number | null
  tuning_cents: number | null
  original_bytes: number
  original_mime: string | null
  rendition_mime: string | null
  manifest: object | null
  created_at: Date
  updated_at: Date
}
export interface TakeNameRow {
  take_id: string
  user_id: string
}
export interface RecordingRow {
  id: string
  group_id: string
  uploader_id: string
  mime: string
  next_piece: number
  bytes: number
  take_id: string | null
  created_at: Date
}
export interface DocumentRow {
  id: string
  kind: string
  tune_id: string | null
  take_id: string | null
  revision: number
  body: unknown
  created_at: Date
  updated_at: Date
}
export interface DocumentEditRow {
  id: string
  document_id: string
  revision: number
  actor_id: string | null
  operations: unknown[]
  inverse: unknown[]
  parts: string[]
  undoes: string | null
  redoes: string | null
  created_at: Date
}
export interface CommentRow {
  id: string
  take_id: string
  author_id: string
  kind: CommentKind
  text: string
  start_sec: number
  end_sec: number
  settled_at: Date | null
  settled_by: string | null
  created_at: Date
  updated_at: Date
}
export interface ReplyRow {
  id: string
  comment_id: string
  author_id: string
  text: string
  created_at: Date
  updated_at: Date
}
export interface SavedLoopRow {
  id: string
  take_id: string
  user_id: string
  name: string
  start_sec: number
  end_sec: number
  rate: number | null
  ladder: SpeedLadder | null
  rest_beats: number
  created_at: Date
  updated_at: Date
}
export interface ClipRow {
  id: string
  take_id: string
  user_id: string
  settings: ClipSettings
  file_name: string
  duration_sec: number
  state: Clip['state']
  stage: string | null
  progress: number
  fault: string | null
  bytes: number | null
  created_at: Date
  expires_at: Date
}
export interface SessionRow {
  id: string
  group_id: string
  take_id: string
  started_by: string
  leader_id: string | null
  transport: TransportState
  started_at: Date
  ended_at: Date | null
}
export interface SessionPersonRow {
  session_id: string
  user_id: string
  is_away: boolean
  joined_at: Date
  left_at: Date | null
}

declare module 'knex/types/tables.js' {
  interface Tables {
    users: UserRow
    sign_ins: SignInRow
    groups: GroupRow
    memberships: MembershipRow
    teacher_links: TeacherLinkRow
    invitations: InvitationRow
    events: EventRow
    audit_log: AuditRow
    tunes: TuneRow
    takes: TakeRow
    take_names: TakeNameRow
    recordings: RecordingRow
    documents: DocumentRow
    document_edits: DocumentEditRow
    comments: CommentRow
    replies: ReplyRow
    saved_loops: SavedLoopRow
    clips: ClipRow
    sessions: SessionRow
    session_people: SessionPersonRow
    seeded: { name: string; at: Date }
  }
}
