set local role spanwright_owner;
set local search_path = spanwright;

drop table estimate;

reset role;
