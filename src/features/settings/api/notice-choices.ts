import { queryOptions, useMutation, useQueryClient } from "@tanstack/react-query";
import { getNoticeChoices, putNoticeChoices, type NoticeChoices } from "@shared/contract/notices";
import { call } from "@/lib/api-client";

export const noticeChoicesQuery = () =>
  queryOptions({ queryKey: ["notice-choices"], queryFn: ({ signal }) => call(getNoticeChoices, { signal }) });

/** Each tick is kept at once; it is seen before the server has answered, and goes back where that fails. */
export const useChooseNotices = () => {
  const queryClient = useQueryClient();
  const { queryKey } = noticeChoicesQuery();
  return useMutation({
    mutationFn: (body: NoticeChoices) => call(putNoticeChoices, { body }),
    // Two quick ticks reach the server in the order they were made.
    scope: { id: "notice-choices" },
    onMutate: async (choices) => {
      await queryClient.cancelQueries({ queryKey });
      queryClient.setQueryData(queryKey, choices);
    },
    onError: () => queryClient.invalidateQueries({ queryKey }),
  });
};
