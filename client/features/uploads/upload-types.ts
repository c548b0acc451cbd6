import type { PlayedOver, Reach, Take } from '@shared/contracts/takes'

/** What the person says about a recording when it is kept. */
export interface KeepDetails {
  groupId: string
  title: string
  tuneId?: string
  reach: Reach
  /** It was played over another take. */
  over?: PlayedOver
}

export interface UploadJob {
  /** The take's id, made here: sending twice makes one take. */
  id: string
  /** Whose it is: the next person at this browser does not see it. */
  ownerId: string
  file: File
  details: KeepDetails
  /** The server has it: what was kept of it in this browser can go. */
  onSent?: () => void
}

/** waiting: for its turn. offline: tries again by itself. sent: the server has it and reads it. */
export type UploadState = 'waiting' | 'sending' | 'offline' | 'failed' | 'sent'

export interface Upload {
  id: string
  ownerId: string
  title: string
  fileName: string
  bytes: number
  sentBytes: number
  state: UploadState
  /** What the server said, or what stands in the way. */
  fault: string | null
  /** False where sending the same bytes again cannot help. */
  canRetry: boolean
  take: Take | null
}

export type SendUpload = (job: UploadJob, onSent: (bytes: number) => void, signal: AbortSignal) => Promise<Take>
