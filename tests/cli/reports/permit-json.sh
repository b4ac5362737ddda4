small_book
"$weirbook" permit --month 2025-03 --as json
