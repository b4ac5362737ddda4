# Which reading is meant is never guessed.
small_book
cat >two.csv <<END
date,time,point,parameter,value,unit,sample,method
2025-03-12,08:00,EFF,BOD5,10,mg/L,,SM 5210 B
2025-03-12,14:00,EFF,BOD5,12,mg/L,,SM 5210 B
2025-03-12,14:00,EFF,BOD5,13,mg/L,second,SM 5210 B
END
"$weirbook" load --by tester two.csv >/dev/null
remember small.book
try() { "$weirbook" amend --reason r --by lab "$@"; echo "exit status $?"; }
try --date 2025-03-12 --point EFF --parameter BOD5 --value 11
try --date 2025-03-12 --time 14:00 --point EFF --parameter BOD5 --value 11
try --date 2025-03-12 --time 9:00 --point EFF --parameter BOD5 --value 11
try --date 2025-03-13 --point EFF --parameter BOD5 --value 11
try --date 2025-03-11 --point EFF --parameter BOD5 --value 24
try --date 2025-03-11 --point EFG --parameter BOD5 --value 1
try --date 2025-03-11 --point EFF --parameter BOD55 --value 1
try --date 2025-03-11 --point EFF --parameter BOD5 --value 1O
try --date 2025-03-11 --point EFF --parameter BOD5 --value -1
try --date 2025-03-11 --point EFF --parameter BOD5 --value ND
try --date 2025-03-11 --point EFF --parameter BOD5 --value 1 --unit mgg/L
try --date 2025-03-11 --point EFF --parameter BOD5 --value 1 --unit MGD
try --date 2025-03-11 --time 25:00 --point EFF --parameter BOD5 --value 1
try --date 2025-03-11 --point EFF --parameter BOD5
try --date 2025-03-11 --point EFF --parameter BOD5 --value 1 --invalid
try --date 2025-03-11 --point EFF --parameter BOD5 --value 1 --reason ''
"$weirbook" amend --date 2025-03-11 --point EFF --parameter BOD5 --value 1
echo "exit status $?"
"$weirbook" --read-only amend --date 2025-03-11 --point EFF --parameter BOD5 --value 1 --reason r
echo "exit status $?"
unchanged
try --date 2025-03-12 --time 14:00 --sample second --point EFF --parameter BOD5 --value 11
try --date 2025-03-12 --time 08:00 --point EFF --parameter BOD5 --value 9
"$weirbook" export --from 2025-03-12 --to 2025-03-12
