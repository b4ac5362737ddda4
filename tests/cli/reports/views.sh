# The book's views in the sqlite3 shell.
small_book
sqlite3 -header -csv small.book "SELECT date, time, point, parameter, value, unit, file, line FROM readings"
sqlite3 -header -csv small.book "SELECT * FROM limits"
sqlite3 -header -csv small.book "SELECT * FROM points"
sqlite3 -csv small.book "SELECT name FROM sqlite_schema WHERE type = 'view' ORDER BY name"
for view in $(sqlite3 small.book "SELECT name FROM sqlite_schema WHERE type = 'view'"); do
    sqlite3 small.book "SELECT count(*) FROM $view" >/dev/null || echo "cannot read $view"
done
