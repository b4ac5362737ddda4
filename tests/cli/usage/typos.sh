small_book
"$weirbook" permti
echo "exit status $?"
"$weirbook" permit --mnth 2025-03
echo "exit status $?"
"$weirbook" permit --month March
echo "exit status $?"
"$weirbook" permit --month 2025-03 --as xml
echo "exit status $?"
"$weirbook" permit
echo "exit status $?"
"$weirbook" new only-one
echo "exit status $?"
"$weirbook" day 2025-3-1
echo "exit status $?"
"$weirbook" load --revise=yes march.csv
echo "exit status $?"
for days in 0 10001 1.5 -1 many; do
    "$weirbook" day 2025-03-04 --smooth "$days"
    echo "exit status $?"
done
"$weirbook" day 1900-01-01 --smooth 10000 | tail -n 1
