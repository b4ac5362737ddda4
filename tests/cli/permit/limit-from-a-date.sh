# A limit that changes from a day on leaves the months before as they were judged: the old row ends, the new one begins.
small_book
"$weirbook" -b small.book permit --month 2025-03 --as csv >before.csv
cat >plant/limits.csv <<END
outfall,point,parameter,basis,statistic,bound,limit,unit,samples,from,to
001,EFF,BOD5,concentration,monthly-average,max,30,mg/L,1/week,,2025-03-31
001,EFF,BOD5,concentration,monthly-average,max,10,mg/L,1/week,2025-04-01,
001,EFF,BOD5,concentration,weekly-average,max,45,mg/L,,,
001,EFF,BOD5,removal,monthly-average,min,85,%,,,
END
"$weirbook" -b small.book plant --apply plant
"$weirbook" -b small.book permit --month 2025-03 --as csv >after.csv
cmp before.csv after.csv && echo "March is as it was"
printf 'date,point,parameter,value,unit\n2025-04-08,EFF,BOD5,20,mg/L\n' >april.csv
"$weirbook" -b small.book load --by tester april.csv >load.txt
"$weirbook" -b small.book permit --month 2025-04 --as csv | grep monthly-average,
