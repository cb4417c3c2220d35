set local role spanwright_owner;
set local search_path = spanwright;

drop function session_by_hash(bytea);
drop function token_by_public_id(text);
drop table session;
drop table token;
drop table organisation;

reset role;
