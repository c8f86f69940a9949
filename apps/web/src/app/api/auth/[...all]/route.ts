import { services } from "@/server/services";

export const dynamic = "force-dynamic";

async function answer(request: Request): Promise<Response> {
  const { auth } = await services();
  return auth.handler(request);
}

export { answer as GET, answer as POST };
