set local role spanwright_owner;
set local search_path = spanwright;

drop table audit_event;
drop table idempotency;

reset role;
