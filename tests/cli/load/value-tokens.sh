small_book
cat >tokens.csv <<END
date,point,parameter,value,unit,mdl,rl
2025-04-01,EFF,BOD5,12.50,mg/L,,
2025-04-02,EFF,BOD5,<2,mg/L,,
2025-04-03,EFF,BOD5,<=2,mg/L,,
2025-04-04,EFF,BOD5,>600,mg/L,,
2025-04-05,EFF,BOD5,>=600,mg/L,,
2025-04-06,EFF,BOD5,ND,mg/L,1.5,4
2025-04-07,EFF,BOD5,DNQ 2.5,mg/L,1.5,4
2025-04-08,EFF,BOD5,TNTC,mg/L,,800
2025-04-09,EFF,BOD5,E 12,mg/L,,
2025-04-10,EFF,BOD5,C,mg/L,,
2025-04-11,EFF,BOD5,code 9,mg/L,,
2025-04-12,EFF,BOD5,,mg/L,,
END
"$weirbook" load --by tester tokens.csv
"$weirbook" export --from 2025-04-01
