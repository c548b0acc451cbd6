// What keys and pedals can do on the desk. Which keys do it: client/transport/keys.ts, and a person's own preferences.

export const keyActions = [
  'playPause',
  'backBar',
  'onBar',
  'backBeat',
  'onBeat',
  'toStart',
  'againBefore',
  'loop',
  'loopStart',
  'loopEnd',
  'slower',
  'faster',
  'fullSpeed',
  'pitchUp',
  'pitchDown',
  'octaveUp',
  'lowFocus',
  'clickOnOff',
  'countIn',
  'tapTempo',
  'zoomIn',
  'zoomOut',
  'follow',
  'comment',
  'undo',
  'redo',
  'keySheet'
] as const
export type KeyAction = (typeof keyActions)[number]
