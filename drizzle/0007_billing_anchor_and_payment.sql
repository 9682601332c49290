ALTER TABLE "billing_customers" ADD COLUMN "deleted_at" timestamp with time zone;--> statement-breakpoint
ALTER TABLE "checkouts" ADD COLUMN "payment_intent_id" text;--> statement-breakpoint
ALTER TABLE "subscriptions" ADD COLUMN "anchor" timestamp with time zone NOT NULL;--> statement-breakpoint
-- Organisations founded before exports were counted get theirs to try: once for each person who founded one.
INSERT INTO "export_grants" ("organisation_id", "kind", "key", "amount")
SELECT DISTINCT ON (founders.user_id) founders.organisation_id, 'trial', 'trial:' || founders.user_id, 2
FROM (
	SELECT DISTINCT ON (organisation_id) organisation_id, user_id, created_at
	FROM "memberships" WHERE 'owner' = ANY (roles) ORDER BY organisation_id, created_at
) AS founders
ORDER BY founders.user_id, founders.created_at
ON CONFLICT DO NOTHING;
