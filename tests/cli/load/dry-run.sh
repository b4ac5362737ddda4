# What a dry run prints, loaded, gives the same readings.
small_book
"$weirbook" new other.book plant >/dev/null
remember other.book
cat >wide.csv <<END
date;EFF BOD5 [mg/L];EFF FLOW
04.04.2025;1,5;0,75
05.04.2025;<2;0,80
06.04.2025;TNTC;
END
"$weirbook" -b other.book load --dry-run wide.csv >long.csv
echo "exit status $?"
unchanged
cat long.csv
"$weirbook" -b other.book load --by tester long.csv >/dev/null
"$weirbook" new third.book plant >/dev/null
"$weirbook" -b third.book load --by tester wide.csv >/dev/null
"$weirbook" -b other.book export >a.csv
"$weirbook" -b third.book export >b.csv
cmp a.csv b.csv && echo "the same readings"
