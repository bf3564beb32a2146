-- A database that fell behind what was once said outside of it goes on in a new epoch of the log: its number goes up, and a leaf says why. Only from the epoch
-- that the caller saw, so that two who open one at once open one.
create function entrance.log_epoch_open(from_epoch integer, a_text text, a_hash text) returns bigint
language plpgsql security definer set search_path = public, pg_temp as $$
declare place bigint;
begin
  perform pg_advisory_xact_lock(734001);
  update installation set log_epoch = log_epoch + 1 where id = 1 and log_epoch = from_epoch;
  if not found then return null; end if;
  select coalesce(max(position) + 1, 0) into place from log_leaf;
  insert into log_leaf (position, epoch, kind, text, hash) values (place, from_epoch + 1, 'epoch', a_text, a_hash);
  return place;
end $$;
--> statement-breakpoint
revoke all on function entrance.log_epoch_open(integer, text, text) from public;
--> statement-breakpoint
grant execute on function entrance.log_epoch_open(integer, text, text) to smoothside_staff;
