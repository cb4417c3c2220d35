set local role spanwright_owner;
set local search_path = spanwright;

drop table schedule_revision;
drop table scheme;
drop table project;

reset role;
