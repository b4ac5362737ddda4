small_book
cat >dates.csv <<END
date,point,parameter,value,unit
2099-01-01,EFF,BOD5,21,mg/L
2024-12-31,EFF,BOD5,22,mg/L
2025-02-30,EFF,BOD5,23,mg/L
END
"$weirbook" load dates.csv >told
status=$?
sed "s|today, 20[0-9-]*|today, {today}|" told
exit $status
