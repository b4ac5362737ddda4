# A book of format 1: what stands here as expected was printed by the program of that format.
old_book
remember old.book
"$weirbook" permit --month 2025-03 --as csv
"$weirbook" export
"$weirbook" export --set-aside
unchanged
ls
