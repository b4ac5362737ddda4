# A tier whose condition has no figure is neither chosen nor passed over: both rows are shown, undecided, and say which figure is missing.
small_plant
cat >plant/limits.csv <<END
outfall,point,parameter,basis,statistic,bound,limit,unit,when
001,EFF,BOD5,concentration,monthly-average,max,30,mg/L,EFF FLOW monthly-average > 2.0 MGD
001,EFF,BOD5,concentration,monthly-average,max,20,mg/L,EFF FLOW monthly-average <= 2.0 MGD
END
"$weirbook" new small.book plant >/dev/null
printf 'date,point,parameter,value,unit\n2025-03-04,EFF,BOD5,25,mg/L\n' >march.csv
"$weirbook" load --by tester march.csv >/dev/null
"$weirbook" permit --month 2025-03
echo "exit $?"
printf 'date,point,parameter,value,unit\n2025-03-04,EFF,FLOW,2.0,MGD\n' >flow.csv
"$weirbook" load --by tester flow.csv >/dev/null
"$weirbook" permit --month 2025-03 --as csv
echo "exit $?"
