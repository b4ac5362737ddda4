# Months side by side: a limit from April on, a short month, an exceedance, a less-than that leaves the mean out.
small_plant
cat >>plant/limits.csv <<END
001,EFF,BOD5,load,monthly-average,max,250,lb/d,
END
"$weirbook" new small.book plant >/dev/null
cat >readings.csv <<END
date,point,parameter,value,unit
2025-03-04,EFF,BOD5,20,mg/L
2025-03-04,EFF,FLOW,1.0,MGD
2025-04-08,EFF,BOD5,50,mg/L
2025-04-08,EFF,FLOW,1.0,MGD
2025-05-06,EFF,BOD5,<2,mg/L
END
"$weirbook" load readings.csv >/dev/null
"$weirbook" permit --month 2025-03 --to 2025-05
echo "exit $?"
"$weirbook" permit --month 2025-03 --to 2025-05 --as csv
"$weirbook" permit --month 2025-03 --to 2025-02
"$weirbook" permit --month 2000-03 --to 2025-02
