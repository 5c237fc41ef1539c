-- Likeness of words and letters without accents, for the symptom search. Both extensions are trusted: the owner of the database may create them.
CREATE EXTENSION IF NOT EXISTS pg_trgm;--> statement-breakpoint
CREATE EXTENSION IF NOT EXISTS unaccent;
