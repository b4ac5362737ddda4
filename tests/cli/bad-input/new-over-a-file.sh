small_plant
echo keep >small.book
remember small.book
"$weirbook" new small.book plant
status=$?
unchanged
exit $status
