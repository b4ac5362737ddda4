small_book
echo file >out
"$weirbook" report --month 2025-03 --out out
echo "exit status $?"
"$weirbook" report --month 2025-03 --out nowhere/deep
echo "exit status $?"
