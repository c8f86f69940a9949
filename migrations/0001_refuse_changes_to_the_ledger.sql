-- Entries, nodes and heads are written once. Statement triggers, so that a statement that touches no
-- row is refused as well; ALWAYS, so that replication mode doesn't pass them by.
CREATE FUNCTION refuse_change() RETURNS trigger LANGUAGE plpgsql AS $$
BEGIN
	RAISE EXCEPTION '% of % is refused: the ledger is only ever appended to', TG_OP, TG_TABLE_NAME
		USING ERRCODE = 'restrict_violation';
END
$$;
--> statement-breakpoint
CREATE TRIGGER entries_refuse_change BEFORE UPDATE OR DELETE OR TRUNCATE ON "entries"
	FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER nodes_refuse_change BEFORE UPDATE OR DELETE OR TRUNCATE ON "nodes"
	FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
CREATE TRIGGER heads_refuse_change BEFORE UPDATE OR DELETE OR TRUNCATE ON "heads"
	FOR EACH STATEMENT EXECUTE FUNCTION refuse_change();
--> statement-breakpoint
ALTER TABLE "entries" ENABLE ALWAYS TRIGGER entries_refuse_change;
--> statement-breakpoint
ALTER TABLE "nodes" ENABLE ALWAYS TRIGGER nodes_refuse_change;
--> statement-breakpoint
ALTER TABLE "heads" ENABLE ALWAYS TRIGGER heads_refuse_change;
