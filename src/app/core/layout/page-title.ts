import { Injectable, inject } from '@angular/core';
import { Title } from '@angular/platform-browser';
import { TitleStrategy, type RouterStateSnapshot } from '@angular/router';

/** Titles as "Models · Seamwright"; a page that shows one record names it once it is known. */
@Injectable({ providedIn: 'root' })
export class PageTitle extends TitleStrategy {
  private readonly title = inject(Title);

  override updateTitle(state: RouterStateSnapshot): void {
    this.set(this.buildTitle(state) ?? '');
  }

  set(page: string): void {
    this.title.setTitle(page ? `${page} · Seamwright` : 'Seamwright');
  }
}
