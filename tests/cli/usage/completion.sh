"$weirbook" completion --answer -- pe
"$weirbook" completion --answer -- permit --
"$weirbook" completion --answer -- permit --as ''
"$weirbook" completion --answer -- load ''
"$weirbook" completion --answer -- formula sludge-v
"$weirbook" completion --answer -- formula sludge-volume-index ''
"$weirbook" completion --answer -- help n
"$weirbook" completion --answer -- completion ''
for shell in bash zsh fish; do
    "$weirbook" completion $shell >script.$shell
    command -v $shell >/dev/null && $shell -n script.$shell
done
exit 0
