# Room by algebra (limits of small_plant, half-even): on 2025-03-11 the month has 20.0 and 24 of 4 samples; 30.5 still rounds to 30, so
# (122 - 44) / 2 = 39; a removal of 85 stays met while the mean effluent is under 31 of 200.
small_book
"$weirbook" room --on 2025-03-11
echo "exit status $?"
"$weirbook" room --on 2025-03-11 --as csv
"$weirbook" room --on 2025-03-11 --as json
# After the last of the weeks there is nothing left to take but one more.
"$weirbook" room --on 2025-03-29 --as csv
"$weirbook" room --on 2026-03-29
