import { AppError } from "@/lib/errors";
import { route } from "@/lib/http/route";

const nowhere = route({ scope: "public" }, async ({ request }) => {
  throw new AppError("not-found", `There is no ${new URL(request.url).pathname.slice(0, 200)}; GET /api/v1/openapi.json lists all addresses.`);
});

export { nowhere as GET, nowhere as POST, nowhere as PUT, nowhere as PATCH, nowhere as DELETE };
