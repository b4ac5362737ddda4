# Eight days a week, two days a day: refused with the way out; by reading both can be met.
small_plant
cat >plant/limits.csv <<END
outfall,point,parameter,basis,statistic,bound,limit,unit,samples
001,EFF,BOD5,concentration,monthly-average,max,30,mg/L,8/week
001,EFF,TSS,concentration,daily,max,30,mg/L,2/day
001,EFF,NH3N,concentration,daily,max,30,mg/L,32/month
001,EFF,TP,concentration,daily,max,30,mg/L,0/week
001,EFF,TN,concentration,daily,max,30,mg/L,3/fortnight
END
"$weirbook" new small.book plant
echo "exit $?"
cat >plant/limits.csv <<END
outfall,point,parameter,basis,statistic,bound,limit,unit,samples,rules
001,EFF,BOD5,concentration,monthly-average,max,30,mg/L,8/week,count_by=reading
001,EFF,TSS,concentration,daily,max,30,mg/L,2/day,count_by=reading
END
"$weirbook" new small.book plant >/dev/null && echo "by reading: a book is made"
