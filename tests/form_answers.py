"""Answers of two whole forms, one a line, in the order in which the form asks."""

STATIC = """
nobody
calm
nobody
door
snap
none
nothing
staff
ward nurse
no
not_yet
no
no
none
2026-01-14 10:30
Ward 3, bay B
ward
earthed
230 V
50 Hz
24 %
at_place
2026-01-14 10:45
I reached for the door and it bit me
ward nurse
p1
en
before
instant
in_gap
no
no
no
yes
no
no
push plate of the ward door
intact
no
no
fingertip
point
bare
dry
nothing
Snap at the push plate after walking from the lift
walking
40
0.5 s
no
no
no
no
vinyl
no
ordinary
occupied
no
no
2026-01-14 10:50
""".strip().splitlines()
"""A snap at a push plate: nothing that the mains could reach."""

MAINS = """
mark
calm
procedure
mains
on
tingle others
alarm
moved
staff
circulating nurse
no
referred
2026-01-14 07:25
no
u
no
u
none
2026-01-14 07:10
or-6
yes
seen
1.4 mA
2026-01-14 07:20
yes
no
24 %
same room
2026-01-14 07:20
OR6 wall sensor
no
ward helper
2026-01-14 07:15
it buzzed as long as I held the shelf
circulating nurse
p1
en
before
longer
while holding
no
u
no
no
no
electrosurgery cart
u
own
isolated
pendant outlet W3
fixed cord
I
intact
no
u
intact
u
no
hand
palm
bare
dry
nothing
no
Buzzing while holding the shelf of the cart
touching device
no
no
no
no
no
occupied
no
no
now
""".strip().splitlines()
"""A device on an isolated supply in alarm, while a procedure is under way; with the example site."""
