-- Tasks of before have waited since they were made.
update "tasks" set "queued_at" = "created_at";
--> statement-breakpoint
-- The operators' record is only ever added to, as the teams' is.
create or replace function refuse_change_of_record() returns trigger language plpgsql as $$
begin
  if pg_trigger_depth() > 1 then
    return case tg_op when 'DELETE' then old else new end;
  end if;
  raise exception '% are only ever added', tg_table_name using errcode = 'restrict_violation';
end
$$;
--> statement-breakpoint
create trigger operator_events_append_only before update or delete on "operator_events"
for each row execute function refuse_change_of_record();
--> statement-breakpoint
create trigger operator_events_no_truncate before truncate on "operator_events"
for each statement execute function refuse_change_of_record();
