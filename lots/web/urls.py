"""Addresses of the book: the facility stands in each."""

from django.contrib.auth import views as auth
from django.urls import path

from .views import (
    browse,
    decide,
    packet,
    record,
    registers,
    season,
    step,
    tags,
    today,
    trace,
    unposted,
)

urlpatterns = [
    path("", browse.home, name="home"),
    path("login/", auth.LoginView.as_view(), name="login"),
    path("logout/", auth.LogoutView.as_view(), name="logout"),
    path("password/", auth.PasswordChangeView.as_view(), name="password_change"),
    path("password/done/", auth.PasswordChangeDoneView.as_view(), name="password_change_done"),
    path("f/<slug:slug>/", today.today, name="today"),
    path("f/<slug:slug>/lots/", browse.lots, name="lots"),
    path("f/<slug:slug>/lots/<uuid:uuid>/", trace.lot, name="lot"),
    path("f/<slug:slug>/lots/<uuid:uuid>/chain/", trace.chain, name="chain"),
    path("f/<slug:slug>/lots/<uuid:uuid>/hold/", decide.hold, name="hold"),
    path("f/<slug:slug>/lots/<uuid:uuid>/amount/", decide.correct_amount, name="amount"),
    path("f/<slug:slug>/lots/<uuid:uuid>/release/", decide.release, name="release"),
    path("f/<slug:slug>/lots/<uuid:uuid>/packet.<slug:form>", packet.lot_packet, name="packet"),
    path("f/<slug:slug>/holds/<uuid:uuid>/", decide.decide, name="decide"),
    path("f/<slug:slug>/record/<slug:kind>/", record.record, name="record"),
    path("f/<slug:slug>/steps/<uuid:uuid>/", step.step, name="step"),
    path("f/<slug:slug>/steps/<uuid:uuid>/tags/", tags.tags, name="tags"),
    path("f/<slug:slug>/steps/<uuid:uuid>/void/", decide.void, name="void"),
    path("f/<slug:slug>/steps/<uuid:uuid>/divide/", decide.divide, name="divide"),
    path("f/<slug:slug>/steps/<uuid:uuid>/amend/", decide.amend, name="amend"),
    path("f/<slug:slug>/steps/<uuid:uuid>/<slug:act>/", record.running, name="running"),
    path("f/<slug:slug>/unposted/<uuid:uuid>/", decide.settle, name="settle"),
    path("f/<slug:slug>/unposted/<uuid:uuid>/form/", unposted.reopen, name="reopen"),
    path("f/<slug:slug>/registers/<slug:name>/", registers.register, name="register"),
    path("f/<slug:slug>/registers/<slug:name>/<uuid:uuid>/", registers.change, name="change"),
    path("f/<slug:slug>/vessels/", browse.vessels, name="vessels"),
    path("f/<slug:slug>/trace/", trace.trace, name="trace"),
    path("f/<slug:slug>/season/", season.season, name="season"),
    path("f/<slug:slug>/packets/", packet.packets, name="packets"),
    path("f/<slug:slug>/people/", decide.people, name="people"),
    path("f/<slug:slug>/people/<uuid:uuid>/", decide.person, name="person"),
    path("f/<slug:slug>/rules/", browse.rules, name="rules"),
    path("f/<slug:slug>/journal/", browse.journal, name="journal"),
]
