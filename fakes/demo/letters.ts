import type { LetterDraft } from '#shared/types/reviews'

/** Letters of the invented coach. They state no figure that was not measured on the demo's own film. */

export const HEAVY_LETTER: LetterDraft = {
  title: 'Why the heavy ones come in twos',
  leaveAlone: 'Joel, your set-up and the top of your swing are in good order, so we leave them alone. Everything that costs you contact happens in the last quarter second.',
  saw: 'With the shaft level on the way down, the end of your grip hangs well behind the ball. **The wrists have already started to let go.** On the solid one you sent, the grip end is almost over the ball at the same moment.\n\nSeen from behind, you stand up no earlier than at the start, so that is not it.',
  why: 'Your hands slow down before the ball, so the club overtakes them early and meets the ground first. On the next one you lift to avoid the ground, and catch it thin. If a ball further forward in your stance played a part, your next film will show it.',
  howSure: 'fairly_sure',
  oneChange: 'Keep the grip end travelling past the ball before the wrists let go.',
  drillTitle: 'Low punch, level to level',
  drillSteps: '1. Start with the handle slightly ahead of the ball.\n2. Swing only until the shaft is level, then strike the turf.\n3. Finish with the shaft level again, toe of the club to the sky.\n\nBalls that start right mean the face was left open: turn the forearms a little more. On a mat, lay a towel behind the ball and miss it.',
  drillDose: '4 sessions a week, 10 minutes',
  caution: 'You mention a stiff lower back. Warm up first, keep these to short swings, and stop if your back or wrist hurts. Ask a physician or physiotherapist before you make them longer.',
}

export const EARLIER_LETTER: LetterDraft = {
  title: 'Topping the 5-wood: the ground comes too late',
  leaveAlone: 'Your grip and how you stand to the ball are fine.',
  saw: 'On the topped ones your chest comes up before the club is down, and the club passes over the ball on its way up. On the tee that is high enough to be solid.',
  why: 'You try to help the ball into the air. The loft does that.',
  howSure: 'sure',
  oneChange: 'Brush the grass on the target side of the ball.',
  drillTitle: 'Brush, then ball',
  drillSteps: '1. Lay a tee flat, a hand in front of where the ball would be.\n2. Make small swings that brush the grass from the tee onward.\n3. Put a ball down and forget it: brush the same grass.',
  drillDose: '3 sessions a week, 20 brushes and 10 balls',
  caution: 'Small swings only at first. Stop if anything hurts, and swing only where nobody can be struck.',
}

export const HALF_WRITTEN: LetterDraft = {
  title: 'Topping off tight lies',
  leaveAlone: 'Priya, your balance is good all the way through. Leave it alone.',
  saw: 'On the topped ones you hang back on the trail foot, and the lowest point of the swing is behind the ball.',
  why: '',
  howSure: 'fairly_sure',
  oneChange: '',
  drillTitle: '',
  drillSteps: '',
  drillDose: '',
  caution: '',
}
