small_book
"$weirbook" permit --month 2025-03 --on 2025-03-12 --as csv
