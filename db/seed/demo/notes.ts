/** What is read before every run; one breath long. */
export const NOTES_POINTS = [
  'Tray empty and in its slot.',
  'Eye protection on. Guard shut.',
  'Hands, sleeves and hair clear of the jaws and the feed wheel.',
  'The hardware stop is in reach. The stop on this screen is not an emergency stop.',
];

/** The demo's full notes: our own words for what such notes should cover. */
export const NOTES_FULL_TEXT = `These notes do not replace your local rules, your risk assessment or the people who are qualified for both. Where they disagree with this page, they are right.

Before you start
Wear eye protection: off-cuts fly. Shut the guard, and do not wedge or tape it; a guard that is in your way is a guard to report. Find the hardware stop with your hand and try it today. The stop on a screen travels through software and a network, so it is never an emergency stop.

Where you can be hurt
The jaws shear whatever is between them, fingers too. The feed wheel pulls in hair, cuffs, gloves and lanyards. Keep both hands and all of these outside the guard while the rig may move. It may also move when the screen says that it is silent.

What may be cut
Only the gauge that the program names: soft copper, with nothing connected at either end. No steel, no spring wire, no cable that could be live.

Electricity and heat
Mains covers are on and the frame is bonded to earth. Heaters are off and cold; motors can be hot for an hour.

The wire's way
The spool turns freely and the path to the guide is clear. Say who watches this rig, and stay within sight of it while it cuts.

Jams and blades
Pull the plug first and keep it in your hand or your pocket until you are done. Begin a work hold on the screen, so that nobody starts the rig behind your back. Only you end it, at the rig.

Afterwards
Brush off-cuts away, never wipe them with your hand. Before you press start, read the name on the rig itself: is this the rig that the screen means?`;
