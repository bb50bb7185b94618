/** The process of a test file runs on the database without workers (throw-away-api-database.mjs). */
process.env.DATABASE_URL = process.env.TUFA_TEST_API_DATABASE;
process.env.NEXTAUTH_SECRET = "a key of sessions that only these tests know";
