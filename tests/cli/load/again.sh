small_book
remember small.book
"$weirbook" load march.csv | sed 's/on 20[0-9-]*/on {today}/'
unchanged
