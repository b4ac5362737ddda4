# Who did what, when and why; old values beside new ones.
small_plant
"$weirbook" new small.book plant --by maker >/dev/null
printf 'date,point,parameter,value,unit\n2025-03-11,EFF,BOD5,24,mg/L\n2025-03-25,EFF,BOD5,30,mg/L\n' >march.csv
"$weirbook" load --by tester march.csv >/dev/null
day=$(date -u +%F)
told() { sed "s/20[0-9-]*T[0-9:]*Z/{when}/g; s/$day [0-9:]\{5\}/{day and time}/g; s/$day/{today}/g; s/[0-9a-f]\{64\}/{head}/; s/[0-9a-f]\{16\}\$/{head}/"; }
"$weirbook" amend --date 2025-03-11 --point EFF --parameter BOD5 --value 14 --reason 'digits swapped' --by lab >/dev/null
"$weirbook" remark --from 2025-03-18 --cause 'pump failed' --by 'day shift' >/dev/null
"$weirbook" amend --date 2025-03-25 --point EFF --parameter BOD5 --invalid --reason 'bottle broke' --by lab >/dev/null
printf 'date,point,parameter,value,unit\n2025-04-01,EFF,BOD5,12,mg/L\n' >april.csv
"$weirbook" load --by tester april.csv >/dev/null
"$weirbook" withdraw 6 --reason 'another plant' --by lab >/dev/null
"$weirbook" history --as csv | told
"$weirbook" history | told
echo "--- of March 2025, of the laboratory, of a batch, of a reading"
"$weirbook" history --from 2025-03-01 --to 2025-03-31 --by lab --as csv | told
"$weirbook" history --batch 5 --as csv | told
"$weirbook" history --point EFF --parameter BOD5 --from 2025-03-11 --to 2025-03-11 --readings --as csv | told
"$weirbook" history --by nobody
"$weirbook" history --batches --as csv | told
"$weirbook" history --batches | told
"$weirbook" history --batches --by lab --as csv | cut -d, -f1-4 | told
"$weirbook" history --point EFG
echo "exit status $?"
"$weirbook" history --batches --from 2025-03-01
echo "exit status $?"
"$weirbook" history --batch x
echo "exit status $?"
"$weirbook" history --from 2025-03-02 --to 2025-03-01
echo "exit status $?"
