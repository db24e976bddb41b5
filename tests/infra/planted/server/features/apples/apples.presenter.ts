export const applesPresenter = "applesPresenter";
