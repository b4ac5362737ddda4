"$weirbook" formula | head -n 12
"$weirbook" formula --as csv | head -n 3
