# Conditions on what is not there, or is not one figure a month, are refused with the nearest name.
small_plant
cat >plant/limits.csv <<END
outfall,point,parameter,basis,statistic,bound,limit,unit,when
001,EFF,BOD5,concentration,monthly-average,max,30,mg/L,EFX FLOW monthly-average > 2 MGD
001,EFF,BOD5,concentration,daily,max,30,mg/L,EFF FLOWW monthly-average > 2 MGD
001,EFF,BOD5,concentration,weekly-average,max,30,mg/L,EFF FLOW daily > 2 MGD
001,EFF,BOD5,concentration,rolling-7-day,max,30,mg/L,EFF FLOW monthly-average > 2 mg/L
001,EFF,BOD5,concentration,rolling-30-day,max,30,mg/L,EFF FLOW monthly-average = 2 MGD
001,EFF,BOD5,concentration,monthly-median,max,30,mg/L,when it rains
END
"$weirbook" new small.book plant
