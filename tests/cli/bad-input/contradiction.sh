small_book
printf 'date,point,parameter,value,unit\n2025-03-04,EFF,BOD5,200,mg/L\n2025-03-11,EFF,BOD5,24.0,mg/L\n' >other.csv
"$weirbook" load other.csv
echo "exit status $?"
"$weirbook" load --by tester --revise other.csv
echo "exit status $?"
"$weirbook" load --by tester --revise --reason 'dilution corrected' other.csv
echo "exit status $?"
sqlite3 small.book "SELECT date, point, parameter, old, new, who, reason FROM revisions"
