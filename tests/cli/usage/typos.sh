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
