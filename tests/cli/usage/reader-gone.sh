# A reader that has seen enough is no failure, and nothing is said of it.
small_book
{ "$weirbook" formula; echo "exit status $?" >status; } | head -n 3
cat status
