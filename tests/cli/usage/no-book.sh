"$weirbook" permit --month 2025-03
echo "exit status $?"
small_book
cp small.book other.book
"$weirbook" permit --month 2025-03
echo "exit status $?"
WEIRBOOK=small.book "$weirbook" permit --month 2025-03 --as csv | head -n 1
