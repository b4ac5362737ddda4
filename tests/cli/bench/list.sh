"$weirbook" bench --list
"$weirbook" bench --list bod
