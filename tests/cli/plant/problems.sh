# All problems of a folder are told together.
small_plant
cat >plant/limits.csv <<END
outfall,point,parameter,basis,statistic,bound,limit,unit,from,to
001,EFX,BOD5,concentration,monthly-average,max,30,mg/L,,
001,EFF,BOD55,concentration,monthly-average,max,30,mg/L,,
001,EFF,BOD5,concentration,monthly-avarage,max,30,mg/L,,
001,EFF,BOD5,concentration,monthly-average,max,3O,mg/L,,
001,EFF,BOD5,concentration,monthly-average,max,30,mg/l,,
001,EFF,TSS,concentration,monthly-average,max,30,mg/L,2025-02-30,
001,EFF,PH,concentration,instantaneous,min,9.0,pH,,
001,EFF,PH,concentration,instantaneous,max,6.0,pH,,
END
echo 'INF,again,influent,' >>plant/points.csv
"$weirbook" new small.book plant
echo "exit status $?"
ls *.book 2>/dev/null
