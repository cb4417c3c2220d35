set local role spanwright_owner;
set local search_path = spanwright;

drop table calibration;
drop table outturn;

reset role;
