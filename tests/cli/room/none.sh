# 100 and 60 are more than all four samples may have (4 x 30.5 = 122): no room since the 11th, the day of the second.
small_plant
printf 'date,point,parameter,value,unit\n2025-03-04,EFF,BOD5,100,mg/L\n2025-03-11,EFF,BOD5,60,mg/L\n2025-03-18,EFF,BOD5,2,mg/L\n' >bad.csv
sed -i '/removal/d' plant/limits.csv
"$weirbook" new small.book plant >/dev/null
"$weirbook" load --by tester bad.csv >/dev/null
"$weirbook" room --on 2025-03-19
echo "exit status $?"
"$weirbook" room --on 2025-03-07
echo "exit status $?"
# A removal without an influent point cannot be looked at.
small_plant
sed -i '/^INF/d' plant/points.csv
"$weirbook" new none.book plant >/dev/null
"$weirbook" -b none.book room --on 2025-03-07
echo "exit status $?"
"$weirbook" -b none.book room --on 2025-02-30
echo "exit status $?"
