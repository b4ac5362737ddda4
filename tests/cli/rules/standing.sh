# Six months beside the screening criteria: 42 of 30 mg/L is 1.4 times, 31 above by any amount.
small_plant
cat >plant/limits.csv <<END
outfall,point,parameter,basis,statistic,bound,limit,unit
001,EFF,BOD5,concentration,monthly-average,max,30,mg/L
001,EFF,BOD5,concentration,weekly-average,max,45,mg/L
001,EFF,TSS,concentration,monthly-average,max,30,mg/L
END
cat >year.csv <<END
date,time,point,parameter,value,unit
2025-01-07,,EFF,BOD5,42,mg/L
2025-02-04,,EFF,BOD5,31,mg/L
2025-03-04,,EFF,BOD5,29,mg/L
2025-04-01,,EFF,BOD5,46,mg/L
2025-05-06,,EFF,BOD5,31,mg/L
2025-06-03,,EFF,BOD5,20,mg/L
2025-06-03,,EFF,TSS,20,mg/L
END
"$weirbook" new small.book plant >/dev/null
"$weirbook" load --by tester year.csv >/dev/null
"$weirbook" permit --month 2025-06 --standing
echo "exit status $?"
"$weirbook" permit --month 2025-06 --standing --group BOD5=II --as csv
"$weirbook" permit --month 2025-07 --standing --on 2025-07-02 --as json
"$weirbook" permit --month 2026-06 --standing
echo "exit status $?"
