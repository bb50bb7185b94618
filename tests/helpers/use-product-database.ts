/** The process of a test file meets the running product's database, with the product's key of sessions (throw-away-product.mjs). */
process.env.DATABASE_URL = process.env.TUFA_TEST_PRODUCT_DATABASE;
process.env.NEXTAUTH_SECRET = process.env.TUFA_TEST_PRODUCT_SECRET;
