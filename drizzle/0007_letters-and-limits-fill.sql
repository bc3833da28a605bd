-- What a result takes with all that hangs on it. octet_length of packed coordinates reads only their header.
create function result_bytes(result uuid) returns integer language sql stable as $$
  select (
    octet_length(r.molfile) + octet_length(r.details::text)
    + coalesce((select sum(octet_length(c.coordinates) + 64) from conformers c where c.result_id = r.id), 0)
    + coalesce((select sum(octet_length(c.coordinates) + 16 * cardinality(c.energies) + octet_length(c.stationary::text))
        from profiles p join profile_curves c on c.profile_id = p.id where p.result_id = r.id), 0)
    + coalesce((select sum(octet_length(m.coordinates) + octet_length(m.energies::text)) from maps m where m.result_id = r.id), 0)
  )::integer
  from results r where r.id = result
$$;
--> statement-breakpoint
update results set bytes = result_bytes(id), made_for = (
  select b.created_by from tasks t join batches b on b.id = t.batch_id
  where t.result_id = results.id order by t.reused, t.finished_at limit 1
);
--> statement-breakpoint
-- Nobody is told of batches that ended before there were letters about it.
update batches set
  finished_at = coalesce((select max(t.finished_at) from tasks t where t.batch_id = batches.id), submitted_at),
  told_at = now()
where submitted_at is not null
  and not exists (select 1 from tasks t where t.batch_id = batches.id and t.state in ('queued', 'running'));
--> statement-breakpoint
-- Lines of a team's record go only with the whole team, and change only where the account of who acted is deleted;
-- both come from a foreign key.
create function refuse_change_of_team_record() returns trigger language plpgsql as $$
begin
  if pg_trigger_depth() > 1 then
    if tg_op = 'DELETE' and not exists (select 1 from teams where id = old.team_id) then
      return old;
    end if;
    if tg_op = 'UPDATE' and new.actor_id is null
      and (new.id, new.at, new.team_id, new.action, new.subject, new.address, new.details)
        is not distinct from (old.id, old.at, old.team_id, old.action, old.subject, old.address, old.details)
    then
      return new;
    end if;
  end if;
  raise exception 'events are only ever added' using errcode = 'restrict_violation';
end
$$;
--> statement-breakpoint
drop trigger events_append_only on "events";
--> statement-breakpoint
create trigger events_append_only before update or delete on "events"
for each row execute function refuse_change_of_team_record();
