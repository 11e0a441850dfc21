"""What `?` says: what a screen is for, its keys, and the words."""

from typing import Final

WORDS: Final = """\
WORDS
survey          a folder with the reaches of one stream and one campaign
reach           a length of stream that has one set of values
part            a part of the cross-section with its own n: main channel,
                left or right flood plain (looking downstream), or your own
visit           who was there, when, at what stage, in what growth
flow condition  what the n is for: growth, in or over bank, discharge
factor          one of the six things that make n: base, irregularity,
                variation, obstruction, vegetation, meander
grade           one row of a factor's published table
handbook        one published set of factor tables
finding         what a check says: stop (do not accept it like this),
                ask (answer in a note), tell (good to know)
trail           the record of a reach: lines are added, never changed
adopted n       the n that goes to the model instead of the estimate

n is a judgement. Calibrate it to observed flows where they exist; check how
sensitive the water level is to it; local codes and a licensed practitioner's
review come first. Not for decisions on life and limb by itself.
"""

SURVEY_HELP: Final = f"""\
Every line is a part of a reach, in stream order, with its n on one axis that
all lines share, so that a jump between neighbours is seen.

  ├──━━█━━━──┤    thin: lowest to highest n; thick: the spread of the
                  choices (5 to 95 %); block: the best value
  ◆               the n somebody adopted      . . . .   nothing judged yet
  ! 1 stop        do not accept it as it is
  ? 2 ask         answer in a note
  in review       a question was asked; returned, accepted: as a reviewer said
  changed since acceptance        what was accepted is not what stands now

Everything is kept at once; there is nothing to save.

KEYS
Enter  walk through the factors of the selected part, and give its n
+      add: a visit, a flow condition, a part, a reach
/      show only lines with the words you type; Esc shows all again
r      review: the weakest first; question, answer, accept, return
w      weak points first, and back to stream order
f      show another flow condition
g      adopt another n than the estimate, with a reason
u      undo: says first what it takes back
e      export the table of n for a model (.csv, .json)
p      photos and documents of the reach: look, attach, watch a folder
o      second opinion: judge this part blind, without seeing the first n;
       for another person than the one who estimated it
M      unite what two people wrote apart (only where the line above says so)
l      timeline: who said what about this reach
h      handbook: the published tables
↑ ↓ PageUp PageDown Home End   move
Esc    stop reading; leave the filter; leave the survey
q      quit (Ctrl+Q does so everywhere)

{WORDS}"""

START_HELP: Final = f"""\
This tool takes you through Manning's n for every reach of a stream: grade by
grade, from published tables, with a range and the reasons, so that somebody
else can check each digit later.

A survey is a folder. Open one you had, make a new one, or look around in a
copy of the demo survey, which is invented.

KEYS
↑ ↓ and Enter, or the number before an entry
h      handbook: the published tables, without a survey
q      quit

{WORDS}"""

HANDBOOK_HELP: Final = f"""\
The published tables. Each row has a range; what decides it, in short and
below in full; table and page; and how the values were come by: seen in the
publication, seen second hand (in another publication), from memory, or ours
(common practice, no source).

KEYS
↑ ↓    another row
← →    another factor; after channel come the flood plains
b      another handbook
/      search all rows of all handbooks; Esc ends the search
Enter  about this handbook: what it is good for and not, contradictions
Esc    back

{WORDS}"""

TIMELINE_HELP: Final = """\
Every line that was written about this reach, the latest first. Lines are never
changed or removed: undo is a line that takes another one back, and both stay.

KEYS
↑ ↓    another line; below it stands whole
Esc    back
"""

REVIEW_HELP: Final = """\
Every part of every reach under every flow condition, the weakest first. The
order is ours and has no source; its parts are added:

  without note or photo   share of the variance of n that comes from factors
                          nobody gave a reason or evidence for (0 to 1)
  open findings           1 for each that stops, 0.25 for each that asks
  spread to people's      width of the spread of the choices against what
                          experienced people differ by (from memory)
  second opinion          how far the one furthest away is, likewise
  factors nobody chose    twice their share

What is accepted and unchanged comes last.

On a page each factor has a line: its value and range, how much of the
variance of n it drives, its grade and what decides it, whether a note or a
photo backs it. Below stand the sum, what was found and what was asked.

  !  stops: mend it in the walk, or accept over it with a reason
  ?  asks, and nobody answered yet     ✓  answered     ·  good to know
  ~  carried over from elsewhere and never confirmed

KEYS, IN THE LIST AND ON A PAGE
Enter  open the place; on a page: answer a question or finding, or read
/      in the list: show only lines with the words you type; Esc ends it
i      inquire: a question on the marked factor, or on the whole from the
       line of the sum; on a question it goes on from that one
a      accept: says first what is accepted and what speaks against it
A      accept everything that has nothing open, after a list
t      return to the crew, with the reason
d      changed: what was said since it was accepted, line by line
o      second opinion: a blind file for another person, its return, side by
       side, what was agreed on, agreement over the survey
p      photos and documents of the marked factor, else of the whole
l      timeline: who said what about this reach
← →    the next weak place, or the one before (PageUp, PageDown)
h      handbook at this factor            Space  all of the marked line
u      undo your last line of this reach: says first which
Esc    back

Whoever estimated a value cannot accept it, unless the survey says that one
person does both. An acceptance stands while value, range, grade, criterion
and flow condition stand; a new photo, caption or question does not touch it.
n is a judgement; local codes and a licensed practitioner's review come first.
"""
