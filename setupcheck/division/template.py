"""The CSV to start a division test from: it explains its columns and works as it is."""

from __future__ import annotations

EXPLAINED = """\
# Readings of a division test. Lines that begin with # are for you. One line is one reading; save as CSV UTF-8.
# Separate cells by comma, semicolon or tab; write decimals with a point. A station that was not read: leave its cell empty.
#
# STATION, one of these columns
#   angle_deg  angle_gon  angle_dms     a place on the work, from its mark, counter-clockwise seen from its +z side
#   turned_deg turned_gon turned_dms    how far the work was turned from its first station, counter-clockwise seen from +z:
#                                       for a theodolite or an encoder that rides on the work and turns with it; at 0 the
#                                       work's mark has to stand at the worm, or all directions are off by as much
#                                       (or keep angle_... and call setupcheck with --turns-with-work)
#   tooth                               its number: tooth n stands between gap n and gap n + 1 in the order they were cut;
#                                       of holes, the number of the hole
#   Angles may pass 360 and repeat. dms is 10deg 20' 30", 10 20 30 or 10:20:30.
# READING, one of these columns
#   deviation_arcsec   already reduced. Positive: the place (with turned_...: the work) stands further counter-clockwise
#                      than it should, seen from +z
#   reading_deg  reading_gon  reading_dms   the instrument itself. Each run has its own zero, and which way the circle
#                      counts is seen from the readings
# MORE, where you have it
#   run        its number or name. Each run has a zero of its own: forward and reverse pass of one run share it, so set the
#              instrument anew only between runs, or the backlash cannot be told
#   direction  forward (stations grow; of teeth, their numbers) or reverse. Come to every station from that side, or the
#              backlash gets mixed in
#   face       left or right, or 1 or 2, of a theodolite
#   minutes    time of the reading. Without it the lines follow each other evenly
#   note       for you
#
# What to read: 12 to 36 equal steps of whole crank turns show the wheel; 8 steps inside one crank turn at two or three
# places show the worm; the first station again at the end and a reverse pass show drift and backlash; a second run shows
# what repeats. Turn by hand with the machine locked off, and keep hands out of the mesh while it moves.
#
"""
ROWS = """\
angle_deg,deviation_arcsec,run,direction,minutes,note
0,0.0,1,forward,0,
30,2.7,1,forward,2,
60,-3.9,1,forward,4,
90,-16.9,1,forward,6,
120,-33.1,1,forward,8,
150,-47.8,1,forward,10,
180,-58.9,1,forward,12,
210,-62.0,1,forward,14,
240,-56.5,1,forward,16,
270,-44.7,1,forward,18,
300,-27.7,1,forward,20,
330,-11.0,1,forward,22,
360,0.5,1,forward,24,closing
360,14.9,1,reverse,26,
330,14.9,1,reverse,28,
300,4.3,1,reverse,30,
270,-10.5,1,reverse,32,
240,-26.6,1,reverse,34,
210,-39.5,1,reverse,36,
180,-47.6,1,reverse,38,
150,-48.3,1,reverse,40,
120,-40.3,1,reverse,42,
90,-25.4,1,reverse,44,
60,-7.4,1,reverse,46,
30,8.1,1,reverse,48,
0,16.0,1,reverse,50,closing
"""


def template() -> str:
    """The whole file. Its numbers are invented: teeth some 8 um off their axis at a radius of 54 mm."""
    return EXPLAINED + ROWS
