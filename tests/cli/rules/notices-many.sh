# Several limits of one day and outfall share a notice; outfalls whose names tame to one keep drafts of their own.
small_plant
cat >plant/points.csv <<END
point,name,role,outfall
INF,Raw influent,influent,
EFF,Final effluent,effluent,00/1
EF2,Second effluent,effluent,00_1
END
cat >plant/limits.csv <<END
outfall,point,parameter,basis,statistic,bound,limit,unit
00/1,EFF,BOD5,concentration,daily,max,30,mg/L
00/1,EFF,BOD5,load,daily,max,250,lb/d
00/1,EFF,PH,concentration,instantaneous,min,6.0,pH
00_1,EF2,BOD5,concentration,daily,max,30,mg/L
00/1,EFF,BOD5,concentration,monthly-average,max,30,mg/L
END
cat >march.csv <<END
date,time,point,parameter,value,unit,method,analyst,collected_by
2025-03-04,08:00,EFF,BOD5,31,mg/L,SM 5210 B,A1,O1
2025-03-04,,EFF,FLOW,1.1,MGD,,,
2025-03-04,07:10,EFF,PH,5.8,pH,,,O1
2025-03-04,09:20,EFF,PH,5.9,pH,,,O1
2025-03-04,,EF2,BOD5,33,mg/L,,,
END
"$weirbook" new small.book plant >/dev/null
"$weirbook" load --by tester march.csv >/dev/null
"$weirbook" permit --month 2025-03 --notices drafts
ls drafts
cat drafts/notice-5-days-2025-03-04-00_1.txt
grep -c DRAFT drafts/*
