# Tiers that hold at once for some flow are refused; those that part at a number, in another unit too, are fine.
small_plant
cat >plant/limits.csv <<END
outfall,point,parameter,basis,statistic,bound,limit,unit,when
001,EFF,BOD5,concentration,monthly-average,max,25,mg/L,EFF FLOW monthly-average > 2 MGD
001,EFF,BOD5,concentration,monthly-average,max,30,mg/L,EFF FLOW monthly-average <= 3 MGD
001,EFF,TSS,concentration,monthly-average,max,25,mg/L,EFF FLOW monthly-average > 2 MGD
001,EFF,TSS,concentration,monthly-average,max,20,mg/L,EFF FLOW monthly-average > 4 MGD
001,EFF,NH3N,concentration,monthly-average,max,5,mg/L,EFF FLOW monthly-average >= 2 MGD
001,EFF,NH3N,concentration,monthly-average,max,6,mg/L,EFF FLOW monthly-average <= 2 MGD
END
"$weirbook" new small.book plant
sed -i 's/<= 3 MGD/<= 2 MGD/; s/> 4 MGD/< 7570.823568 m3\/d/; s/<= 2 MGD$/< 2 MGD/' plant/limits.csv
"$weirbook" new small.book plant
