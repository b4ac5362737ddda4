# What cannot be right comes first, then what deserves a question; nothing is changed.
small_book
cat >odd.csv <<END
date,time,point,parameter,value,unit,method,analyst,collected_by,analyzed
2025-03-05,08:00,EFF,TSS,12,mg/L,SM 2540 D,lab,shift,2025-03-06
2025-03-05,08:00,EFF,VSS,12.5,mg/L,SM 2540 E,lab,shift,2025-03-06
2025-03-06,08:00,EFF,PH,71,pH,SM 4500-H,lab,shift,2025-03-06
2025-03-07,08:00,INF,BOD5,20,mg/L,SM 5210 B,lab,shift,2025-03-12
2025-03-07,08:00,EFF,BOD5,22,mg/L,SM 5210 B,lab,shift,2025-03-12
END
"$weirbook" load --by tester odd.csv >/dev/null
remember small.book
"$weirbook" doubts --month 2025-03
echo "exit status $?"
"$weirbook" doubts --month 2025-03 --as csv
"$weirbook" doubts --month 2025-03 --as json | head -4
unchanged
# A month without readings has no doubts.
"$weirbook" doubts --month 2025-07
echo "exit status $?"
