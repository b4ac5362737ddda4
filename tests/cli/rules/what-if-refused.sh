# A word that is no rule or no value is told with the nearest; pages that exclude one another are named.
small_book
for words in "--what-if nondetct=half" "--what-if nondetect=haf" "--what-if half" "--what-if nondetect=half --what-if nondetect=full" \
    "--what-if nondetect=half --rules" "--rules --count" "--group CU=II" "--standing --group COPPR=II" "--standing --group BOD5=III" "--standing --group BOD5" \
    "--aware 2025-03-01" "--notices drafts --aware yesterday" "--notices drafts --standing" "--rules=yes"; do
    # shellcheck disable=SC2086
    "$weirbook" permit --month 2025-03 $words
    echo "exit status $?"
done
ls
