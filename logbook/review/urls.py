"""The room's addresses."""

from django.urls import path

from . import papers, signatures, views

app_name = "review"
urlpatterns = [
    path("to-decide/", views.to_decide, name="to_decide"),
    path("jobs/<int:number>/decide/", views.decide, name="decide"),
    path("jobs/<int:number>/decide/back/", views.back_to_bench, name="back"),
    path("jobs/<int:number>/running-undecided/", views.running, name="running"),
    path("jobs/<int:number>/running-undecided/end/", views.end_running, name="end_running"),
    path("jobs/<int:number>/sign/", signatures.sign_page, name="sign"),
    path("jobs/<int:number>/sheet.pdf", papers.sheet, name="sheet"),
    path("jobs/<int:number>/work-order.pdf", papers.work_order_sheet, name="work_order_sheet"),
    path("jobs/<int:number>/blank-<int:task>.pdf", papers.blank_sheet, name="blank_sheet"),
]
