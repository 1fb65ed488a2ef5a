/**
 * The alarms that there are, rationalised as ISA-18.2 asks: few, each with its priority, what comes of it if nobody
 * does anything, and what to do. Priorities, delays and limits are common practice in the room, from memory; a site
 * sets the figures in its rules.
 */
export const alarmKinds = [
  'wood maximum',
  'no reading',
  'gateway lost',
  'climb maximum',
  'spread',
  'below band',
  'stage overrun',
  'short pull',
  'reminder',
] as const
export type AlarmKind = (typeof alarmKinds)[number]

/** 1 is the gravest; 4 is no alarm but a reminder, and is counted apart. */
export type AlarmPriority = 1 | 2 | 3 | 4
export const alarmLevels = ['red', 'amber', 'grey'] as const
export type AlarmLevel = (typeof alarmLevels)[number]

export type AlarmFacts = {
  name: string
  priority: AlarmPriority
  level: AlarmLevel
  /** When it comes. */
  comesWhen: string
  /** What comes of it if nobody does anything. */
  consequence: string
  whatToDo: string
  /** False: it goes by itself when what it says is done. */
  needsSeen: boolean
}

export const alarmCatalog: Record<AlarmKind, AlarmFacts> = {
  'wood maximum': {
    name: 'Wood maximum',
    priority: 1,
    level: 'red',
    comesWhen: 'The lead probe is over the recipe’s wood maximum; over the bend’s limit while bending.',
    consequence: 'The face chars or lights; the barrel is lost.',
    whatToDo: 'Lid off, lower the fire.',
    needsSeen: true,
  },
  'no reading': {
    name: 'No reading',
    priority: 2,
    level: 'amber',
    comesWhen: 'The lead probe gives no reading: open, out of range, stuck, jumping, or silent.',
    consequence: 'The barrel may overheat unseen; a gap over 3 min leaves the firing without a score.',
    whatToDo: 'Look at the barrel, then the probe’s lead.',
    needsSeen: true,
  },
  'gateway lost': {
    name: 'Gateway lost',
    priority: 2,
    level: 'amber',
    comesWhen: 'No message of the gateway that reads the lead probe, though the server is up.',
    consequence: 'No probe of its hearths is read; readings wait in the gateway if it has power.',
    whatToDo: 'Look at the barrel, then at the gateway, its power and its cable.',
    needsSeen: true,
  },
  'climb maximum': {
    name: 'Climb maximum',
    priority: 2,
    level: 'amber',
    comesWhen: 'The wood climbs faster than the recipe’s climb maximum, over the rule’s window.',
    consequence: 'Blisters, and a face darker than its depth.',
    whatToDo: 'Raise the barrel, or lid off.',
    needsSeen: true,
  },
  spread: {
    name: 'Spread',
    priority: 3,
    level: 'amber',
    comesWhen: 'The two opposite probes are further apart than the recipe’s spread.',
    consequence: 'One side toasts darker than the other.',
    whatToDo: 'Turn the barrel; spread the fire. When they are very far apart, look at both probes.',
    needsSeen: true,
  },
  'below band': {
    name: 'Below band',
    priority: 3,
    level: 'amber',
    comesWhen: 'The wood is far below the plan’s band, once the plan is above 120 °C.',
    consequence: 'The toast runs light, or long.',
    whatToDo: 'Feed the fire, lid on; near 100 °C the wood is still wet: wait.',
    needsSeen: true,
  },
  'stage overrun': {
    name: 'Stage overrun',
    priority: 3,
    level: 'amber',
    comesWhen: 'A stage goes on past its time; the last one, once the target dose is there as well.',
    consequence: 'The dose runs over its target.',
    whatToDo: 'End the stage, or go on knowingly.',
    needsSeen: true,
  },
  'short pull': {
    name: 'Short pull',
    priority: 3,
    level: 'amber',
    comesWhen: 'The pull was made in less than the recipe’s minutes.',
    consequence: 'Staves crack at the bend.',
    whatToDo: 'Look for cracked staves before the toast.',
    needsSeen: true,
  },
  reminder: {
    name: 'Reminder',
    priority: 4,
    level: 'grey',
    comesWhen: 'Something of the recipe was due and no mark says that it was done.',
    consequence: 'The recipe is not followed.',
    whatToDo: 'Do it and mark it, or let it go.',
    needsSeen: false,
  },
}

/** Reminders are no alarms: rates and counts leave them out. */
export function countsAsAlarm(kind: AlarmKind): boolean {
  return alarmCatalog[kind].priority < 4
}

/** Why an alarm is shelved, as the fireside offers it; the table keeps the words. */
export const shelfReasons = [
  'The probe is wrong',
  'Known, being worked on',
  'The barrel is off the fire',
  'Meant so',
] as const
