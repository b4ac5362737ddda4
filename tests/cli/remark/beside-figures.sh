# A remark is printed beside what it is about, and no figure changes by it.
small_book
"$weirbook" permit --month 2025-03 --on 2025-04-10 --as csv >before.csv
"$weirbook" remark --from 2025-03-25 --point EFF --parameter BOD5 --cause 'return pump failed' --by 'day shift'
"$weirbook" remark --from 2025-03-11 --point EFF --parameter BOD5 --statistic weekly-average --remedy 'feed, "cut" by half' --by 'day shift'
"$weirbook" remark --from 2025-03-10 --to 2025-03-11 --event wet-weather --text '60 mm of rain' --by 'night shift'
"$weirbook" remark --from 2025-04-01 --point EFF --parameter BOD5 --cause 'another month' --by 'day shift'
"$weirbook" permit --month 2025-03 --on 2025-04-10 --as csv >after.csv
cut -d, -f1-16 before.csv >before.cut
cut -d, -f1-16 after.csv >after.cut
cmp before.cut after.cut && echo "no figure has changed"
cut -d, -f3,5,6,7,17- after.csv
"$weirbook" permit --month 2025-03 --on 2025-04-10 --as json | grep -c '"remark [0-9]*: return pump failed"'
"$weirbook" permit --month 2025-03 --on 2025-04-10 | sed -n '/^Remarks$/,/^Every/p'
"$weirbook" day 2025-03-11 --as csv
"$weirbook" day 2025-03-11 | sed -n 1,8p
"$weirbook" report --month 2025-03 --out . --printed 2025-04-10 >/dev/null
sed -n '/^Remarks$/,/^Every/p' permit-2025-03.txt
