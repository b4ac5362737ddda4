# Limits that no figure can meet, in one unit or two, are refused by line.
small_plant
cat >plant/limits.csv <<END
outfall,point,parameter,basis,statistic,bound,limit,unit
001,EFF,BOD5,concentration,daily,max,30,mg/L
001,EFF,BOD5,concentration,daily,min,40,mg/L
001,EFF,TSS,concentration,daily,below,30,mg/L
001,EFF,TSS,concentration,daily,min,30,mg/L
001,EFF,NH3N,concentration,daily,max,3,mg/L
001,EFF,NH3N,concentration,daily,min,4000,ug/L
001,EFF,PH,concentration,instantaneous,min,6.0,pH
001,EFF,PH,concentration,instantaneous,max,9.0,pH
END
"$weirbook" new small.book plant
status=$?
[ -e small.book ] || echo "no book is made"
exit $status
