-- The record is only ever added to. What a foreign key does when a team or a person is deleted comes from a trigger
-- and is let through; a statement of its own is not.
create function refuse_change_of_record() returns trigger language plpgsql as $$
begin
  if pg_trigger_depth() > 1 then
    return case tg_op when 'DELETE' then old else new end;
  end if;
  raise exception 'events are only ever added' using errcode = 'restrict_violation';
end
$$;
--> statement-breakpoint
create trigger events_append_only before update or delete on "events"
for each row execute function refuse_change_of_record();
--> statement-breakpoint
create trigger events_no_truncate before truncate on "events"
for each statement execute function refuse_change_of_record();
