export const pearsPresenter = "pearsPresenter";
