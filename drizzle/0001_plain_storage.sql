-- Blocks and orders are read in part by substring() and hold doubles that hardly compress: stored out of line, as they are.
ALTER TABLE "result_block" ALTER COLUMN "bytes" SET STORAGE EXTERNAL;--> statement-breakpoint
ALTER TABLE "result_order" ALTER COLUMN "rows" SET STORAGE EXTERNAL;
