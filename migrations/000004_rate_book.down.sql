set local role spanwright_owner;
set local search_path = spanwright;

drop table multiplier;
drop table rate_book_version;
drop table rate_book;

reset role;
