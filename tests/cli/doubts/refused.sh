# An answer needs a doubt that is there, and a reason in one line.
small_book
printf 'date,point,parameter,value,unit\n2025-03-06,EFF,PH,71,pH\n' >odd.csv
"$weirbook" load --by tester odd.csv >/dev/null
id=$("$weirbook" doubts --month 2025-03 --as csv | sed -n 2p | cut -d, -f1)
remember small.book
try() { "$weirbook" doubts "$@"; echo "exit status $?"; }
try
try --month 2025-13
try --answer "$id"
try --answer "$id" --reason ''
try --answer "$id" --reason "two
lines"
try --answer "$id" --reason r --by "a$(printf '\033')b"
try --answer nonsense --reason r
try --answer 2025-03-00000 --reason r
try --answer "2025-03-${id#2025-03-?}0" --reason r
try --answer 2025-04-123456 --reason r
try --answer "$id" --reason r --month 2025-04
try --month 2025-03 --reason r
try --month 2025-03 --by lab
unchanged
